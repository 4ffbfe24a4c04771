import type { AppliedKey } from "@/lib/services/channel-keys/schema";

/** What the server answers to a key that is saved or used. */
export interface KeyAnswer {
  ok: boolean;
  message?: string;
  fields?: Record<string, string[] | undefined>;
  value?: AppliedKey;
}

const runs = (numbers: readonly number[]) => `${numbers.length === 1 ? "Run" : "Runs"} ${numbers.join(", ")}`;

/** E.g. "Runs 3, 4 are judged again. Run 1 stays as it is: a final decision rests on it." */
export function appliedWords(applied: AppliedKey | undefined): string {
  if (!applied) return "";
  const { judgedAgain, cited } = applied;
  const sentences = [
    judgedAgain.length === 0
      ? "No run is read differently."
      : `${runs(judgedAgain)} ${judgedAgain.length === 1 ? "is" : "are"} judged again.`,
  ];
  if (cited.length > 0)
    sentences.push(
      `${runs(cited)} ${cited.length === 1 ? "stays as it is" : "stay as they are"}: a final decision rests on ${cited.length === 1 ? "it" : "them"}.`,
    );
  return sentences.join(" ");
}
