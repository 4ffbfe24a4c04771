import { anomalySentences, answerSentences } from "@/components/features/comparisons/answer-line";
import { Card } from "@/components/ui/layout/card";
import type { CampaignResult } from "@/lib/measure/types";

export interface AnswerCardProps {
  result: CampaignResult;
  labels: { a: string; b: string };
  stale?: boolean;
  /** Stands under the answer, e.g. why it is an earlier one. */
  note?: string;
}

/** The answer in words, above everything else; nothing where there is no difference to speak of. */
export function AnswerCard({ result, labels, stale = false, note }: AnswerCardProps) {
  const { delta, sides } = result;
  if (!delta) return null;
  const [first, ...rest] = answerSentences(delta, labels, { a: sides.A?.n ?? 0, b: sides.B?.n ?? 0 });
  return (
    <Card title={stale ? "What the earlier result said" : "The answer"}>
      <p className="font-semibold text-17">{first}</p>
      {rest.length > 0 && <p className="mt-1 max-w-prose text-15">{rest.join(" ")}</p>}
      {note && <p className="mt-2 max-w-prose text-15 text-thin">{note}</p>}
      {anomalySentences(sides, labels).map((sentence) => (
        <p key={sentence} className="mt-2 max-w-prose text-15">
          {sentence}
        </p>
      ))}
      {(delta.warnings ?? []).map((warning) => (
        <p key={warning.code + warning.message} className="mt-2 max-w-prose text-15 text-thin">
          {warning.message}
        </p>
      ))}
    </Card>
  );
}
