"use client";

import { useMutation } from "@tanstack/react-query";
import { FileUp } from "lucide-react";
import { useDropzone } from "react-dropzone";
import { ValuesCheckResult } from "@/components/features/change-sets/values-check-result";
import { Button } from "@/components/ui/action/button";
import { Disclosure } from "@/components/ui/layout/disclosure";
import { Notice } from "@/components/ui/status/notice";
import type { ValuesCheck } from "@/lib/calibration/cdf/check-values";
import { callApi } from "@/lib/client/api";
import { QueryProvider } from "@/lib/client/query-provider";
import { cn } from "@/lib/cn";
import { LARGEST_VALUES_FILE_BYTES, type ShownDescription } from "@/lib/services/change-sets/schema";

export interface CheckValuesFileProps {
  revision: { id: string; number: number };
  /** How far the revision's description is; null without one. */
  described: ShownDescription["state"] | null;
}

const MISSING: Record<Exclude<ShownDescription["state"], "read"> | "none", string> = {
  none: "A description is needed: without one the values in the image are not known. Add it on this page.",
  reading: "The description is still being read. Wait for it, then check the file.",
  refused: "A description that can be read is needed: this one was refused, so the values are not known.",
};

const LARGEST_MB = LARGEST_VALUES_FILE_BYTES / 1e6;

/** Holds a values file from elsewhere against what the image holds; the file is not kept. Folded away until wanted. */
export function CheckValuesFile({ revision, described }: CheckValuesFileProps) {
  return (
    <Disclosure className="no-print" summary="Check a values file">
      {described === "read" ? (
        <QueryProvider>
          <Check revision={revision} />
        </QueryProvider>
      ) : (
        <p className="max-w-prose text-15">{MISSING[described ?? "none"]}</p>
      )}
    </Disclosure>
  );
}

async function send(revisionId: string, file: File): Promise<ValuesCheck> {
  if (file.size > LARGEST_VALUES_FILE_BYTES)
    throw new Error(
      `${file.name} is ${Math.ceil(file.size / 1e6)} MB; the limit is ${LARGEST_MB} MB. Export fewer values at once.`,
    );
  if (file.size === 0) throw new Error(`${file.name} is empty: it has 0 bytes. Choose another.`);
  return callApi<ValuesCheck>(`/api/revisions/${revisionId}/values-check`, { method: "POST", bytes: file });
}

function Check({ revision }: Pick<CheckValuesFileProps, "revision">) {
  const check = useMutation({ mutationFn: (file: File) => send(revision.id, file) });
  const { getRootProps, getInputProps, isDragActive, open } = useDropzone({
    multiple: false,
    noClick: true,
    noKeyboard: true,
    disabled: check.isPending,
    onDrop: ([file]) => file && check.mutate(file),
  });
  const label = `Values file to hold against R${revision.number}`;
  return (
    <div className="flex flex-col gap-4">
      <div
        {...getRootProps()}
        className={cn(
          "flex flex-wrap items-center gap-x-4 gap-y-3 rounded-sheet border border-dashed border-edge bg-surface p-4",
          isDragActive && "border-solid border-action bg-sunk",
        )}
      >
        {/* The library hides its input by a style attribute, which the content policy refuses: a class does it. */}
        <input
          {...getInputProps({ style: undefined })}
          className="sr-only"
          tabIndex={-1}
          aria-label={label}
        />
        <Button icon={<FileUp />} onClick={open} disabled={check.isPending}>
          {check.isPending ? "Comparing …" : "Choose a file"}
        </Button>
        <p className="max-w-prose text-15 text-ink2">
          Or drop it here: ASAM CDF (.cdfx), up to {LARGEST_MB} MB. Each value in it is compared with R
          {revision.number}; the file is not kept.
        </p>
      </div>
      {check.error && (
        <Notice tone="problem" live title={check.variables?.name}>
          {check.error.message}
        </Notice>
      )}
      {check.data && <ValuesCheckResult fileName={check.variables?.name ?? ""} check={check.data} />}
    </div>
  );
}
