import { z } from "zod";

/** Largest file taken, in bytes; a larger one is refused before it is sent. */
export const LARGEST_BYTES = {
  log: 200_000_000,
  image: 64 * 1024 * 1024,
  description: 128 * 1024 * 1024,
} as const;

/** The last part of what the browser calls the file, without control characters: shown, never used as a place. */
const fileName = z
  .string()
  .transform((name) =>
    (name.split(/[/\\]/).at(-1) ?? "")
      .replaceAll(/\p{Cc}|\p{Cf}/gu, "")
      .trim()
      .slice(0, 200),
  )
  .pipe(z.string().min(1, "The file has no name. Give it one and try again."));

export const beginUpload = z
  .strictObject({
    purpose: z.enum(["image", "log", "description"]),
    fileName,
    sizeBytes: z.int().min(1, "The file is empty: it has 0 bytes. Choose another."),
    sha256: z.string().regex(/^[0-9a-f]{64}$/, "The fingerprint is not a SHA-256."),
  })
  .superRefine((upload, check) => {
    const limit = LARGEST_BYTES[upload.purpose];
    if (upload.sizeBytes > limit) {
      const size = Math.ceil(upload.sizeBytes / 1e6);
      check.addIssue({
        code: "custom",
        message: `${upload.fileName} has ${size} MB; the limit is ${Math.floor(limit / 1e6)} MB.`,
      });
    }
  });
export type BeginUpload = z.infer<typeof beginUpload>;

/** What begin, part and status answer. */
export const uploadState = z.object({
  uploadId: z.uuid(),
  state: z.enum(["open", "complete", "used", "cancelled"]),
  receivedBytes: z.number(),
  sizeBytes: z.number(),
  partBytes: z.number(),
  /** Where the same bytes are already in use in this workspace, in words. */
  alreadyUsed: z.array(z.string()),
});
export type UploadState = z.infer<typeof uploadState>;
