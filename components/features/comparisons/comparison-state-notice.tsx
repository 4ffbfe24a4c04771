import type { Route } from "next";
import Link from "next/link";
import { ComparisonWatch } from "@/components/features/comparisons/comparison-watch";
import { RecomputeForm, type RecomputeFormProps } from "@/components/features/comparisons/recompute-form";
import { Notice } from "@/components/ui/status/notice";
import { Skeleton } from "@/components/ui/status/skeleton";
import type { ComparisonView } from "@/lib/services/comparisons/schema";

export interface ComparisonStateNoticeProps extends Pick<RecomputeFormProps, "action" | "blockedBecause"> {
  view: Pick<
    ComparisonView,
    | "id"
    | "state"
    | "recomputing"
    | "inputSha256"
    | "failure"
    | "moved"
    | "versionOnly"
    | "basis"
    | "programme"
    | "result"
  >;
}

/** How the result stands towards what counts now: on its way, stale with what moved, failed with why, or with warnings. */
export function ComparisonStateNotice({ view, action, blockedBecause }: ComparisonStateNoticeProps) {
  const watch = (
    <ComparisonWatch
      comparisonId={view.id}
      shown={{ state: view.state, recomputing: view.recomputing, inputSha256: view.inputSha256 }}
    />
  );
  const recompute = <RecomputeForm comparisonId={view.id} action={action} blockedBecause={blockedBecause} />;
  switch (view.state) {
    case "waiting":
      return (
        <>
          <Notice title="The comparison is being computed">
            The worker reads the logs of both sides. {watch}
          </Notice>
          <Skeleton className="h-96 w-full" />
        </>
      );
    case "failed":
      return (
        <Notice tone="problem" title="The comparison could not be computed" actions={recompute}>
          {view.failure}
        </Notice>
      );
    case "stale":
      return (
        <Notice
          tone="caution"
          title={
            view.versionOnly
              ? `Computed with analysis version ${view.basis?.analysisVersion}`
              : "Stale: this result belongs to earlier inputs"
          }
          actions={view.recomputing ? undefined : recompute}
        >
          <ul className="list-disc pl-5">
            {view.moved.map((sentence) => (
              <li key={sentence}>{sentence}</li>
            ))}
          </ul>
          {view.versionOnly && (
            <p>
              The runs are the same, and this result stays as it was. The worker computes it anew by itself;{" "}
              <Link href={`/programmes/${view.programme.id}/analysis` as Route} className="link">
                what that moves
              </Link>{" "}
              is then shown beside it.
            </p>
          )}
          {view.recomputing ? "It is being computed anew. " : ""}
          {watch}
        </Notice>
      );
    case "ready": {
      const warnings = view.result?.warnings ?? [];
      if (warnings.length === 0) return null;
      return (
        <Notice tone="caution" title="Read with care">
          <ul className="list-disc pl-5">
            {warnings.map((warning) => (
              <li key={warning.code + warning.message}>{warning.message}</li>
            ))}
          </ul>
        </Notice>
      );
    }
  }
}
