"use client";
import { zodResolver } from "@hookform/resolvers/zod";
import { useMutation } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useState } from "react";
import { useForm } from "react-hook-form";
import { ChangedRanges } from "@/components/features/revisions/changed-ranges";
import { ImageUnderstood } from "@/components/features/revisions/image-understood";
import { RevisionFields } from "@/components/features/revisions/revision-fields";
import { DescriptionUploads, descriptionUploadIds } from "@/components/features/uploads/description-uploads";
import { UploadList } from "@/components/features/uploads/upload-list";
import { isOnItsWay, useUploads } from "@/components/features/uploads/use-uploads";
import { Button } from "@/components/ui/action/button";
import { RadioCards } from "@/components/ui/form/radio-cards";
import { Select } from "@/components/ui/form/select";
import { TextInput } from "@/components/ui/form/text-input";
import { Card } from "@/components/ui/layout/card";
import { Notice } from "@/components/ui/status/notice";
import { callApi } from "@/lib/client/api";
import {
  type CreateRevision,
  type ImagePreview,
  type RevisionFormValues,
  type RevisionText,
  revisionForm,
} from "@/lib/services/revisions/schema";

export interface NewRevisionFormProps {
  programmeId: string;
  parents: {
    id: string;
    number: number;
    title: string;
    stands: boolean;
    /** Files of its description; null: it has none. */
    descriptionFiles: string[] | null;
  }[];
}

type DescriptionFrom = "parent" | "files" | "none";

/** Image first, what was understood of it, then what the calibrator states; nothing joins the lineage before the last button. */
export function NewRevisionForm({ programmeId, parents }: NewRevisionFormProps) {
  const router = useRouter();
  const uploads = useUploads("image");
  const item = uploads.items.find((candidate) => candidate.uploadId !== null);
  const [parentId, setParentId] = useState(parents[0]?.id ?? "");
  const parent = parents.find(({ id }) => id === parentId);
  const descriptionFiles = useUploads("description");
  const [chosenFrom, setChosenFrom] = useState<DescriptionFrom | null>(null);
  const [mainId, setMainId] = useState<string | null>(null);
  const usualFrom = parent?.descriptionFiles ? "parent" : "files";
  const describedBy =
    chosenFrom === null || (chosenFrom === "parent" && usualFrom === "files") ? usualFrom : chosenFrom;
  const [baseAddress, setBaseAddress] = useState("");
  const isRaw = item !== undefined && /\.bin$/i.test(item.file.name);
  const form = useForm<RevisionFormValues, unknown, RevisionText>({
    resolver: zodResolver(revisionForm),
    defaultValues: { title: "", note: "", changeReason: "", intendedUse: "", touchesEmissionOrSafety: "" },
  });
  const preview = useMutation({
    mutationFn: (uploadId: string) =>
      callApi<ImagePreview>("/api/revisions/preview", {
        method: "POST",
        json: { uploadId, parentId: parentId === "" ? null : parentId, baseAddress },
      }),
  });
  const isUnderstood = preview.data !== undefined && !preview.isPending;

  const add = form.handleSubmit(async (text) => {
    if (!item) return;
    await uploads.attach(item, async (uploadId, idempotencyKey) => {
      const json: CreateRevision = {
        ...text,
        programmeId,
        uploadId,
        parentId: parentId === "" ? null : parentId,
        baseAddress,
        descriptionUploadIds:
          describedBy === "files" ? descriptionUploadIds(descriptionFiles.items, mainId) : [],
        sameDescription: describedBy === "parent",
      };
      const made = await callApi<{ revisionId: string; number: number }>("/api/revisions", {
        method: "POST",
        json,
        idempotencyKey,
      });
      router.push(`/revisions/${made.revisionId}`);
      return `R${made.number} is in the lineage as a draft.`;
    });
  });

  const isSending = descriptionFiles.items.some(isOnItsWay);
  const blocked = !isUnderstood
    ? "Drop an image and have it read first."
    : describedBy === "files" && isSending
      ? "The description is still on its way."
      : null;

  return (
    <form onSubmit={add} noValidate className="flex flex-col gap-6">
      <Card
        title="Image"
        description="Intel HEX, Motorola S-record or raw binary, up to 67 MB. The bytes are kept as they come."
      >
        <div className="flex flex-col gap-4">
          <Select
            label="Made from"
            hint="The parent in the lineage; differences are shown against it."
            value={parentId}
            onChange={(event) => {
              setParentId(event.target.value);
              preview.reset();
            }}
            emptyLabel="No parent: the first image of this programme"
            options={parents.map(({ id, number, title, stands }) => ({
              value: id,
              label: `R${number} ${title}${stands ? " (stands)" : ""}`,
            }))}
          />
          <UploadList
            uploads={uploads}
            purpose="image"
            title="Drop the image here"
            hint="One file."
            multiple={false}
            onAdded={() => preview.reset()}
          />
          {isRaw && (
            <TextInput
              mono
              label="Base address of the raw binary"
              hint="Where its first byte lies, e.g. 0x810000."
              value={baseAddress}
              onChange={(event) => {
                setBaseAddress(event.target.value);
                preview.reset();
              }}
            />
          )}
          {item?.uploadId && !isUnderstood && (
            <div>
              <Button
                look="filled"
                disabled={preview.isPending}
                onClick={() => preview.mutate(item.uploadId as string)}
              >
                {preview.isPending ? "Reading …" : "Read the image"}
              </Button>
            </div>
          )}
          {preview.error && (
            <Notice tone="problem" title="This image is refused" live>
              {preview.error.message}
            </Notice>
          )}
        </div>
      </Card>
      {preview.data && (
        <Card title="What was understood">
          <div className="flex flex-col gap-4">
            <ImageUnderstood {...preview.data} />
            {preview.data.difference && (
              <ChangedRanges
                difference={preview.data.difference}
                parentNumber={preview.data.difference.parentNumber}
              />
            )}
          </div>
        </Card>
      )}
      <Card
        title="Description"
        description="What tells where each map, curve and value lies. Without one a change is shown as bytes; it can be added later."
      >
        <div className="flex flex-col gap-4">
          <RadioCards
            name="description"
            legend="The image is read by"
            columns={3}
            value={describedBy}
            onChange={(event) => setChosenFrom(event.target.value as DescriptionFrom)}
            options={[
              {
                value: "parent",
                label: parent ? `The same description as R${parent.number}` : "The parent's description",
                description: parent?.descriptionFiles?.join(", "),
                blockedBecause: parent?.descriptionFiles ? null : "There is none to take over.",
              },
              { value: "files", label: "Files of its own" },
              { value: "none", label: "None yet" },
            ]}
          />
          {describedBy === "files" && (
            <DescriptionUploads uploads={descriptionFiles} mainId={mainId} onMain={setMainId} />
          )}
        </div>
      </Card>
      <Card title="What you state">
        <RevisionFields register={form.register} control={form.control} errors={form.formState.errors} />
      </Card>
      <div className="flex flex-wrap items-center gap-3">
        <Button type="submit" look="filled" blockedBecause={blocked} disabled={item?.phase === "attaching"}>
          Add as a draft
        </Button>
      </div>
    </form>
  );
}
