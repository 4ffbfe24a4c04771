/** One thing of a description can't be read; `message` says why in plain words and goes to `notRead`. Never leaves this folder. */
export class NotReadable extends Error {}
