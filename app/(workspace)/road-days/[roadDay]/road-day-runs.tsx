"use client";

import { useQuery } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useEffect } from "react";
import { DropLogs, type DropLogsProps } from "@/app/(workspace)/road-days/[roadDay]/drop-logs";
import { RunList } from "@/components/features/runs/run-list";
import { Card } from "@/components/ui/layout/card";
import { EmptyState } from "@/components/ui/status/empty-state";
import { Notice } from "@/components/ui/status/notice";
import { QueryProvider } from "@/lib/client/query-provider";
import { roadDayRunsQuery } from "@/lib/client/road-day-runs";
import type { RoadDayRuns as Runs } from "@/lib/services/runs/schema";

export interface RoadDayRunsProps extends DropLogsProps {
  /** The runs as the server saw them when it made the page. */
  initial: Runs;
}

/** The live half of the road-day page: drop area and runs with their verdicts. */
export function RoadDayRuns({ initial, ...drop }: RoadDayRunsProps) {
  return (
    <QueryProvider>
      <Card
        id="drop"
        title="Attach logs"
        description="Park first. The second person at the recorder does this, never the driver."
      >
        {drop.blockedBecause && (
          <Notice tone="caution" className="mb-4">
            {drop.blockedBecause}
          </Notice>
        )}
        <DropLogs {...drop} />
      </Card>
      <Verdicts roadDayId={drop.roadDayId} initial={initial} />
    </QueryProvider>
  );
}

/** What the order card depends on, as one text. */
const verdictsOf = ({ runs }: Runs) =>
  runs.map((run) => `${run.number} ${run.verdict} ${run.setAside}`).join(",");

function Verdicts({ roadDayId, initial }: { roadDayId: string; initial: Runs }) {
  const { data = initial, error } = useQuery({ ...roadDayRunsQuery(roadDayId), initialData: initial });
  const { runs, waiting } = data;
  const router = useRouter();
  const isNews = verdictsOf(data) !== verdictsOf(initial);

  useEffect(() => {
    // The order card above is made by the server from the same runs.
    if (isNews) router.refresh();
  }, [isNews, router]);

  const count = (verdict: (typeof runs)[number]["verdict"]) =>
    runs.filter((run) => run.verdict === verdict && !run.setAside).length;
  return (
    <Card title="Runs" id="runs">
      <p role="status" className="text-15 text-ink2">
        {runs.length === 0
          ? ""
          : `${count("usable")} usable, ${count("refused")} refused${waiting > 0 ? `, ${waiting} waiting for a verdict` : ""}.`}
      </p>
      {error && (
        <Notice tone="caution" live>
          {error.message}
        </Notice>
      )}
      {runs.length === 0 ? (
        <EmptyState sentence="No run is attached yet. Drive the first place of the order card, then drop its log above." />
      ) : (
        <RunList runs={runs} />
      )}
    </Card>
  );
}
