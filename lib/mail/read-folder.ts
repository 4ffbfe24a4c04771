import "server-only";
import { readdir, readFile } from "node:fs/promises";
import { join } from "node:path";
import { z } from "zod";
import { env } from "@/lib/env";
import type { FolderLetter } from "@/lib/mail/transport";

const letterSchema = z.object({
  id: z.uuid(),
  to: z.string(),
  subject: z.string(),
  text: z.string(),
  messageId: z.string(),
  writtenAt: z.string(),
}) satisfies z.ZodType<FolderLetter>;

async function readLetter(path: string): Promise<FolderLetter | null> {
  const parsed = letterSchema.safeParse(JSON.parse(await readFile(path, "utf8")));
  return parsed.success ? parsed.data : null;
}

/** The newest letters of the mail folder, newest first; none when there is no folder yet. Only the demo shows them. */
export async function readMailFolder(limit: number): Promise<FolderLetter[]> {
  const folder = env().MAIL_FOLDER;
  if (folder === undefined) return [];
  const names = await readdir(folder).catch(() => []);
  const read = names.filter((name) => name.endsWith(".json")).map((name) => readLetter(join(folder, name)));
  const letters = (await Promise.all(read)).filter((letter) => letter !== null);
  return letters.sort((a, b) => b.writtenAt.localeCompare(a.writtenAt)).slice(0, limit);
}
