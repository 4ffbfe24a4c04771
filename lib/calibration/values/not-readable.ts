import { cut } from "@/lib/calibration/a2l/findings";

/**
 * One thing of a description can't be read; `message` says why in plain words, however long the names in it are, and goes to
 * `notRead`. Never leaves this folder.
 */
export class NotReadable extends Error {
  constructor(message: string) {
    super(cut(message));
  }
}
