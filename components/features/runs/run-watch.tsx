"use client";

import { useQuery } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useEffect } from "react";
import { QueryProvider } from "@/lib/client/query-provider";
import { roadDayRunsQuery } from "@/lib/client/road-day-runs";

interface RunWatchProps {
  runId: string;
  roadDayId: string;
}

/** Reads the page anew once the verdict of a waiting run is there. Says so to the ear too. */
export function RunWatch(props: RunWatchProps) {
  return (
    <QueryProvider>
      <Watch {...props} />
    </QueryProvider>
  );
}

function Watch({ runId, roadDayId }: RunWatchProps) {
  const router = useRouter();
  const { data, error } = useQuery(roadDayRunsQuery(roadDayId));
  const line = data?.runs.find((run) => run.id === runId);
  const isJudged = line !== undefined && line.verdict !== "waiting";

  useEffect(() => {
    if (isJudged) router.refresh();
  }, [isJudged, router]);

  return (
    <p role="status" className="text-13 text-ink2">
      {error ? `The server can't be asked now: ${error.message}` : "Waiting for the verdict."}
    </p>
  );
}
