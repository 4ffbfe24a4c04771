"use client";

import { useState, useTransition } from "react";
import { appliedWords, type KeyAnswer } from "@/components/features/channel-keys/applied-words";
import { Button } from "@/components/ui/action/button";
import { Table } from "@/components/ui/data/table";
import { Checkbox } from "@/components/ui/form/checkbox";
import { Card } from "@/components/ui/layout/card";
import { Notice } from "@/components/ui/status/notice";
import type { FittingKey } from "@/lib/services/channel-keys/schema";

export interface KeyVersionsProps {
  runId: string;
  /** The version that the run is read with; null: none. */
  used: FittingKey | null;
  versions: readonly (FittingKey & { savedBy: string; savedAt: string })[];
  action: (input: { runId: string; channelKeyId: string | null; everyRun: boolean }) => Promise<KeyAnswer>;
  /** Told what came of it. */
  onDone: (words: string) => void;
}

/** Keys saved for this header, newest first; one tap reads the run with another one. */
export function KeyVersions({ runId, used, versions, action, onDone }: KeyVersionsProps) {
  const [everyRun, setEveryRun] = useState(false);
  const [answer, setAnswer] = useState<KeyAnswer | null>(null);
  const [isPending, start] = useTransition();
  const use = (channelKeyId: string | null) =>
    start(async () => {
      const came = await action({ runId, channelKeyId, everyRun });
      setAnswer(came);
      if (came.ok) onDone(appliedWords(came.value));
    });
  const newest = versions[0];
  const title =
    used === null && newest ? `Key “${newest.name}” v${newest.version} fits` : "Keys for this header";
  return (
    <Card title={title} id="versions">
      <div className="flex flex-col gap-3">
        <Table
          caption="Saved versions"
          dense
          columns={[
            { key: "name", header: "Key", rowHeader: true, cell: (row) => `${row.name} v${row.version}` },
            { key: "by", header: "Saved", cell: (row) => `${row.savedBy}, ${row.savedAt}` },
            {
              key: "use",
              header: "This run",
              cell: (row) =>
                row.id === used?.id ? (
                  "read with it"
                ) : (
                  <Button
                    size="compact"
                    disabled={isPending}
                    aria-label={`Use ${row.name} version ${row.version}`}
                    onClick={() => use(row.id)}
                  >
                    Use it
                  </Button>
                ),
            },
          ]}
          rows={versions}
          rowKey={(row) => row.id}
          isSelected={(row) => row.id === used?.id}
        />
        <Checkbox
          label="Also for every other run of this programme with the same header"
          checked={everyRun}
          onChange={(event) => setEveryRun(event.target.checked)}
        />
        {used && (
          <Button
            size="compact"
            look="quiet"
            className="self-start"
            disabled={isPending}
            onClick={() => use(null)}
          >
            Read it without a key
          </Button>
        )}
        {answer && !answer.ok && (
          <Notice tone="problem" live>
            {answer.message}
          </Notice>
        )}
      </div>
    </Card>
  );
}
