"use client";

import { useQuery } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useEffect } from "react";
import { comparisonStateQuery } from "@/lib/client/comparison-state";
import { QueryProvider } from "@/lib/client/query-provider";
import type { ComparisonState } from "@/lib/services/comparisons/schema";

interface ComparisonWatchProps {
  comparisonId: string;
  /** What the page shows now; when the server says otherwise the page is read anew. */
  shown: ComparisonState;
}

/** Watches a computation that is on its way and has the page read anew when it is done. Says so to the ear too. */
export function ComparisonWatch(props: ComparisonWatchProps) {
  return (
    <QueryProvider>
      <Watch {...props} />
    </QueryProvider>
  );
}

function Watch({ comparisonId, shown }: ComparisonWatchProps) {
  const router = useRouter();
  const { data, error } = useQuery(comparisonStateQuery(comparisonId));
  const moved =
    data !== undefined &&
    (data.state !== shown.state ||
      data.recomputing !== shown.recomputing ||
      data.inputSha256 !== shown.inputSha256);

  useEffect(() => {
    if (moved) router.refresh();
  }, [moved, router]);

  return (
    <p role="status" className="text-13 text-ink2">
      {error ? `The server can't be asked now: ${error.message}` : "This page follows by itself."}
    </p>
  );
}
