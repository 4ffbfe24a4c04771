"use client";

import { UploadList } from "@/components/features/uploads/upload-list";
import type { UploadItem, useUploads } from "@/components/features/uploads/use-uploads";
import { Select } from "@/components/ui/form/select";

export interface DescriptionUploadsProps {
  uploads: ReturnType<typeof useUploads>;
  /** Row chosen as the main file; null: none was chosen. */
  mainId: string | null;
  onMain: (id: string) => void;
}

const sentOnes = (items: readonly UploadItem[]) => items.filter(({ uploadId }) => uploadId !== null);

/** The main file when nobody chose one: the first that a description is usually called, else the first. */
function mainOf(items: readonly UploadItem[], mainId: string | null): UploadItem | undefined {
  return (
    items.find(({ id }) => id === mainId) ?? items.find(({ file }) => /\.a2l$/i.test(file.name)) ?? items[0]
  );
}

/** Upload ids of a description's files as they are sent on: the main one first, the others in the order they came. */
export function descriptionUploadIds(items: readonly UploadItem[], mainId: string | null): string[] {
  const sent = sentOnes(items);
  const main = mainOf(sent, mainId);
  return [...(main ? [main] : []), ...sent.filter((item) => item !== main)].flatMap(
    ({ uploadId }) => uploadId ?? [],
  );
}

/** The files of one description: dropped all at once, one of them the main one. */
export function DescriptionUploads({ uploads, mainId, onMain }: DescriptionUploadsProps) {
  const sent = sentOnes(uploads.items);
  return (
    <div className="flex flex-col gap-4">
      <UploadList
        uploads={uploads}
        purpose="description"
        title="Drop the description here"
        hint="An ASAM MCD-2 MC text (A2L), with every file that it includes."
      />
      {sent.length > 1 && (
        <Select
          label="Main file"
          hint="The one that includes the others."
          value={mainOf(sent, mainId)?.id ?? ""}
          onChange={(event) => onMain(event.target.value)}
          options={sent.map(({ id, file }) => ({ value: id, label: file.name }))}
        />
      )}
    </div>
  );
}
