"use client";
import { RotateCw, X } from "lucide-react";
import type { ReactNode } from "react";
import { isOnItsWay, type UploadItem } from "@/components/features/uploads/use-uploads";
import { Button } from "@/components/ui/action/button";
import { Notice } from "@/components/ui/status/notice";
import { Progress } from "@/components/ui/status/progress";

const PHASE_WORDS: Record<UploadItem["phase"], string> = {
  waiting: "waiting",
  checking: "checking",
  sending: "sending",
  sent: "sent",
  attaching: "attaching",
  attached: "attached",
  refused: "refused",
};

const megabytes = (bytes: number) => (bytes / 1e6).toFixed(bytes < 1e7 ? 1 : 0);

/** "42 % · 1.2 MB/s · 8 s left"; speed only once there is something to measure. */
function progressText({ phase, doneBytes, file, sinceMs }: UploadItem): string {
  const share = `${Math.round((100 * doneBytes) / file.size)} %`;
  const spentS = sinceMs === null ? 0 : (Date.now() - sinceMs) / 1000;
  if (phase !== "sending" || doneBytes === 0 || spentS < 0.5) return share;
  const perSecond = doneBytes / spentS;
  const leftS = Math.ceil((file.size - doneBytes) / perSecond);
  return `${share} · ${megabytes(perSecond)} MB/s · ${leftS} s left`;
}

export interface UploadRowProps {
  item: UploadItem;
  /** Fields that say what the file is; shown until it is attached. */
  children?: ReactNode;
  /** What came of it, e.g. a link to the run and its verdict. */
  outcome?: ReactNode;
  onRemove: () => void;
  onRetry: () => void;
}

/** One file's row with its own state, reason and way on. */
export function UploadRow({ item, children, outcome, onRemove, onRetry }: UploadRowProps) {
  const isMoving = isOnItsWay(item);
  return (
    <li
      className="flex flex-col gap-3 border-line border-t py-4 first:border-t-0"
      aria-label={item.file.name}
    >
      <div className="flex flex-wrap items-baseline justify-between gap-x-4 gap-y-1">
        <span className="break-all font-semibold">{item.file.name}</span>
        <span className="tabular text-13 text-ink2">
          {megabytes(item.file.size)} MB · <span data-phase={item.phase}>{PHASE_WORDS[item.phase]}</span>
        </span>
      </div>
      {isMoving && (
        <Progress
          label={item.phase === "checking" ? "Making the fingerprint" : "Sending"}
          value={item.doneBytes}
          max={item.file.size}
          detail={progressText(item)}
        />
      )}
      {item.phase !== "attached" &&
        item.alreadyUsed.map((sentence) => (
          <Notice key={sentence} tone="caution">
            {sentence}
          </Notice>
        ))}
      {item.message && (
        <p
          role={item.phase === "attached" ? "status" : "alert"}
          className={item.phase === "attached" ? "text-15" : "text-15 text-unmet"}
        >
          {item.message}
        </p>
      )}
      {item.phase !== "attached" && item.phase !== "refused" && children}
      {item.phase === "attached" && outcome}
      <div className="flex flex-wrap gap-2">
        {item.phase === "refused" && item.file.size > 0 && (
          <Button size="compact" icon={<RotateCw />} onClick={onRetry}>
            Try again
          </Button>
        )}
        {item.phase !== "attaching" && (
          <Button
            size="compact"
            look="quiet"
            icon={<X />}
            onClick={onRemove}
            aria-label={`Remove ${item.file.name}`}
          >
            {isMoving ? "Cancel" : "Remove from list"}
          </Button>
        )}
      </div>
    </li>
  );
}
