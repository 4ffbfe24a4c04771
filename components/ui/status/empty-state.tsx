import type { ReactNode } from "react";

export interface EmptyStateProps {
  /** One sentence: what belongs here and what the first step is. */
  sentence: ReactNode;
  /** The next action, one button or link. */
  action?: ReactNode;
}

/** What stands where nothing is yet: a sentence and the first step, between crop marks like an unprinted sheet. */
export function EmptyState({ sentence, action }: EmptyStateProps) {
  return (
    <div className="crop-marks flex flex-col items-start gap-4 bg-surface px-6 py-8">
      <p className="max-w-prose text-17">{sentence}</p>
      {action}
    </div>
  );
}
