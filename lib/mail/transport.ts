import { mkdir, rename, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { createTransport } from "nodemailer";
import { env } from "@/lib/env";

export interface Letter {
  /** Id of the queue's row: the Message-ID and the file names are made of it, so that a second sending is recognised. */
  id: string;
  to: string;
  subject: string;
  text: string;
}

/** A letter of the mail folder in plain parts, beside its .eml, whose lines are folded and encoded. */
export interface FolderLetter extends Letter {
  messageId: string;
  writtenAt: string;
}

type Send = (letter: Letter) => Promise<void>;

function compose(letter: Letter) {
  const { MAIL_FROM, AUTH_URL } = env();
  const messageId = `<${letter.id}@${new URL(AUTH_URL).hostname}>`;
  return { from: MAIL_FROM, to: letter.to, subject: letter.subject, text: letter.text, messageId };
}

/** Writes beside the place and renames, so that a reader never meets half a file. Only our own user may read it. */
async function writeWhole(path: string, bytes: Buffer | string): Promise<void> {
  await writeFile(`${path}.partial`, bytes, { mode: 0o600 });
  await rename(`${path}.partial`, path);
}

function intoFolder(folder: string): Send {
  const transport = createTransport({ streamTransport: true, buffer: true, newline: "windows" });
  return async (letter) => {
    const mail = compose(letter);
    const { message } = await transport.sendMail(mail);
    const plain: FolderLetter = { ...letter, messageId: mail.messageId, writtenAt: new Date().toISOString() };
    await mkdir(folder, { recursive: true, mode: 0o700 });
    await writeWhole(join(folder, `${letter.id}.eml`), message as Buffer);
    await writeWhole(join(folder, `${letter.id}.json`), `${JSON.stringify(plain, null, 2)}\n`);
  };
}

function bySmtp(url: string): Send {
  const transport = createTransport(url, { connectionTimeout: 10_000, socketTimeout: 20_000 });
  return async (letter) => {
    await transport.sendMail(compose(letter));
  };
}

/** How this process sends: by SMTP_URL, else into MAIL_FOLDER. */
export function mailTransport(): Send {
  const { SMTP_URL, MAIL_FOLDER } = env();
  if (SMTP_URL !== undefined) return bySmtp(SMTP_URL);
  // The settings guarantee one of the two.
  return intoFolder(MAIL_FOLDER ?? "");
}
