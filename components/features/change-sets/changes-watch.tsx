"use client";

import { useQuery } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useEffect } from "react";
import { changeSetStateQuery } from "@/lib/client/change-set-state";
import { QueryProvider } from "@/lib/client/query-provider";
import type { ChangeSetState } from "@/lib/services/change-sets/schema";

interface ChangesWatchProps {
  changeSetId: string;
  /** What the page shows now; when the server says otherwise the page is read anew. */
  shown: ChangeSetState;
}

/** Watches a change set or its coverage on its way and has the page read anew when it is done. Says so to the ear too. */
export function ChangesWatch(props: ChangesWatchProps) {
  return (
    <QueryProvider>
      <Watch {...props} />
    </QueryProvider>
  );
}

function Watch({ changeSetId, shown }: ChangesWatchProps) {
  const router = useRouter();
  const { data, error } = useQuery(changeSetStateQuery(changeSetId));
  const moved = data !== undefined && (data.state !== shown.state || data.coverage !== shown.coverage);

  useEffect(() => {
    if (moved) router.refresh();
  }, [moved, router]);

  return (
    <p role="status" className="text-13 text-ink2">
      {error ? `The server can't be asked now: ${error.message}` : "This page follows by itself."}
    </p>
  );
}
