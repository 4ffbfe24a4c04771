"use client";
import type { ReactNode } from "react";
import { DropArea, type DropAreaProps } from "@/components/features/uploads/drop-area";
import { UploadRow } from "@/components/features/uploads/upload-row";
import type { UploadItem, useUploads } from "@/components/features/uploads/use-uploads";

export interface UploadListProps extends Pick<DropAreaProps, "purpose" | "title" | "hint"> {
  uploads: ReturnType<typeof useUploads>;
  multiple?: boolean;
  /** Told the new rows, e.g. to prefill what each file is. */
  onAdded?: (items: UploadItem[]) => void;
  /** Fields of a row until it is attached. */
  renderFields?: (item: UploadItem) => ReactNode;
  /** What came of a row once it is attached. */
  renderOutcome?: (item: UploadItem) => ReactNode;
}

/** A drop area and one row a file. State comes from `useUploads`, so that the page can attach rows one by one or all at once. */
export function UploadList({
  uploads,
  purpose,
  title,
  hint,
  multiple = true,
  onAdded,
  renderFields,
  renderOutcome,
}: UploadListProps) {
  return (
    <div className="flex flex-col gap-4">
      <DropArea
        purpose={purpose}
        title={title}
        hint={hint}
        multiple={multiple}
        onFiles={(files) => {
          const added = uploads.add(files);
          onAdded?.(added);
        }}
      />
      {uploads.items.length > 0 && (
        <ul aria-label="Files" className="flex flex-col">
          {uploads.items.map((item) => (
            <UploadRow
              key={item.id}
              item={item}
              outcome={renderOutcome?.(item)}
              onRemove={() => uploads.remove(item)}
              onRetry={() => uploads.retry(item)}
            >
              {renderFields?.(item)}
            </UploadRow>
          ))}
        </ul>
      )}
    </div>
  );
}
