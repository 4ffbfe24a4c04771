import { answerSentences } from "@/components/features/comparisons/answer-line";
import { Card } from "@/components/ui/layout/card";
import type { DeltaResult } from "@/lib/measure/types";

export interface AnswerCardProps {
  delta: DeltaResult;
  labels: { a: string; b: string };
  stale?: boolean;
}

/** The answer in words, above everything else. */
export function AnswerCard({ delta, labels, stale = false }: AnswerCardProps) {
  const [first, ...rest] = answerSentences(delta, labels);
  return (
    <Card title={stale ? "What the earlier result said" : "The answer"}>
      <p className="font-semibold text-17">{first}</p>
      {rest.length > 0 && <p className="mt-1 max-w-prose text-15">{rest.join(" ")}</p>}
      {(delta.warnings ?? []).map((warning) => (
        <p key={warning.code + warning.message} className="mt-2 max-w-prose text-15 text-thin">
          {warning.message}
        </p>
      ))}
    </Card>
  );
}
