import { S3ServiceException } from "@aws-sdk/client-s3";
import { NotFoundError, OutOfSpaceError, TwinpassError, UnavailableError } from "@/lib/errors";

/** HTTP status of a refusal by the store; undefined where no answer came. */
export function statusOf(error: unknown): number | undefined {
  return error instanceof S3ServiceException ? error.$metadata.httpStatusCode : undefined;
}

/** True where the upload id is unknown: completed, aborted or expired. */
export function isUnknownUpload(error: unknown): boolean {
  return error instanceof S3ServiceException && error.name === "NoSuchUpload";
}

function typedError(error: unknown): TwinpassError {
  const name = error instanceof S3ServiceException ? error.name : "no answer";
  const status = statusOf(error);
  if (name === "NoSuchBucket") {
    return new UnavailableError(
      "bucket_missing",
      "The bucket of the file store does not exist. Create it or set S3_BUCKET.",
    );
  }
  if (status === 404) return new NotFoundError("object_not_found", "The file is not in the store.");
  if (status === 507) {
    return new OutOfSpaceError(
      "store_full",
      "The file store has no room left. Nothing was stored; free space and try again.",
    );
  }
  if (status === 401 || status === 403) {
    return new UnavailableError(
      "store_refused",
      "The file store refused our access key. Check the S3_ settings and the clock of this machine.",
    );
  }
  return new UnavailableError(
    "store_unavailable",
    `The file store did not do what it was asked (${status ?? name}). Try again; if it stays so, check the store.`,
  );
}

/** Turns an error of the SDK into one of ours; ours pass through. The original is in `cause`. */
export function s3Error(error: unknown): TwinpassError {
  if (error instanceof TwinpassError) return error;
  const typed = typedError(error);
  typed.cause = error;
  return typed;
}
