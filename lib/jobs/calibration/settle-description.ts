import { type DescriptionRow, selectDescription, settleDescription } from "@/db/queries/descriptions";
import { readDescription } from "@/lib/calibration/a2l/read-description";
import type { Description, DescriptionFile } from "@/lib/calibration/a2l/types";
import { READER_VERSION } from "@/lib/calibration/reader-version";
import { FileRefusedError } from "@/lib/errors";
import { summariseDescription } from "@/lib/jobs/calibration/summarise-description";
import type { System } from "@/lib/jobs/system";
import { readBlob } from "@/lib/services/blobs";

interface DescriptionJob {
  workspaceId: string;
  descriptionId: string;
}

// Several jobs in a row read by one description; it goes when memory is wanted.
let last: { id: string; description: WeakRef<Description> } | null = null;

/** The files of a description in their order, whole. @throws NotFoundError, UnavailableError of the store */
export async function readFilesOf(
  { store }: System,
  { workspaceId, files }: DescriptionRow,
): Promise<DescriptionFile[]> {
  const read = [];
  for (const { name, sha256 } of files)
    read.push({ name, bytes: await readBlob({ store, workspaceId }, sha256) });
  return read;
}

/**
 * Parses a kept description, from its files in their order.
 * @throws FileRefusedError; NotFoundError, UnavailableError of the store
 */
export async function openDescription(system: System, row: DescriptionRow): Promise<Description> {
  const known = last?.id === row.id ? last.description.deref() : undefined;
  if (known) return known;
  const description = readDescription(await readFilesOf(system, row));
  last = { id: row.id, description: new WeakRef(description) };
  return description;
}

/**
 * A description that this version of the reader has read or refused; does it now where nobody did. One that is refused is an outcome.
 * @returns null where there is none
 * @throws what kept its files from being read from the store; the queue tries again
 */
export async function settledDescription(
  system: System,
  job: DescriptionJob,
): Promise<DescriptionRow | null> {
  const { db } = system;
  const row = await selectDescription(db, job);
  if (!row || row.readerVersion === READER_VERSION) return row;
  const outcome = await openDescription(system, row).then(
    (description) => ({ state: "read", summary: summariseDescription(description), failure: null }) as const,
    (error: unknown) => {
      if (!(error instanceof FileRefusedError)) throw error;
      return { state: "refused", summary: null, failure: error.message } as const;
    },
  );
  await settleDescription(db, { ...job, readerVersion: READER_VERSION, outcome });
  return { ...row, ...outcome, readerVersion: READER_VERSION };
}

/** Reads a description for people to see what was understood. May run any number of times. @throws as settledDescription */
export async function readKeptDescription(system: System, job: DescriptionJob): Promise<void> {
  await settledDescription(system, job);
}

/** The last try failed too: whoever waits is told. */
export async function giveUpReadingDescription({ db }: System, job: DescriptionJob): Promise<void> {
  const row = await selectDescription(db, job);
  if (row?.state !== "reading") return;
  const failure =
    "The description could not be read on our side. Its files are kept as they came. Tell whoever runs this installation.";
  // No version of the reader settled it, so that it is tried again another day.
  await settleDescription(db, {
    ...job,
    readerVersion: null,
    outcome: { state: "refused", summary: null, failure },
  });
}
