"use client";
import { Upload } from "lucide-react";
import { type FileError, useDropzone } from "react-dropzone";
import { Button } from "@/components/ui/action/button";
import { cn } from "@/lib/cn";
import { type BeginUpload, LARGEST_BYTES } from "@/lib/services/uploads/schema";

export interface DropAreaProps {
  purpose: BeginUpload["purpose"];
  /** E.g. "Drop run logs here". */
  title: string;
  /** What is taken, in words. */
  hint: string;
  multiple: boolean;
  onFiles: (files: { file: File; refusal: string | null }[]) => void;
}

const megabytes = (bytes: number) => Math.ceil(bytes / 1e6);

/** All that is wrong with a file before it is sent, in one plain text; null when nothing. */
function refusalOf(file: File, purpose: BeginUpload["purpose"]): string | null {
  if (file.size === 0) return `${file.name} is empty: it has 0 bytes. Choose another.`;
  const limit = LARGEST_BYTES[purpose];
  if (file.size > limit) {
    return `${file.name} is ${megabytes(file.size)} MB; the limit is ${Math.floor(limit / 1e6)} MB.`;
  }
  return null;
}

/** Where files are dropped or chosen. A file that can't be taken gets its row and reason like the others. */
export function DropArea({ purpose, title, hint, multiple, onFiles }: DropAreaProps) {
  const { getRootProps, getInputProps, isDragActive, open } = useDropzone({
    multiple,
    noClick: true,
    noKeyboard: true,
    onDrop: (accepted, rejected) => {
      const tooMany = (errors: readonly FileError[]) =>
        errors.some((error) => error.code === "too-many-files");
      onFiles([
        ...accepted.map((file) => ({ file, refusal: refusalOf(file, purpose) })),
        ...rejected.map(({ file, errors }) => ({
          file,
          refusal: tooMany(errors)
            ? "Only one file is taken here. Drop one alone."
            : "The browser could not read this file.",
        })),
      ]);
    },
  });
  return (
    <div
      {...getRootProps()}
      className={cn(
        "flex flex-col items-center gap-3 rounded-sheet border border-dashed border-edge bg-surface px-4 py-8 text-center",
        isDragActive && "border-solid border-action bg-sunk",
      )}
    >
      {/* The library hides its input by a style attribute, which the content policy refuses: a class does it. */}
      <input {...getInputProps({ style: undefined })} className="sr-only" tabIndex={-1} aria-label={title} />
      <p className="text-17 font-semibold">{title}</p>
      <p className="max-w-prose text-15 text-ink2">{hint}</p>
      <Button size="roadside" icon={<Upload />} onClick={open}>
        {multiple ? "Choose files" : "Choose a file"}
      </Button>
    </div>
  );
}
