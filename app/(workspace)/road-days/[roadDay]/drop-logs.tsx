"use client";

import { useQuery, useQueryClient } from "@tanstack/react-query";
import type { Route } from "next";
import Link from "next/link";
import { useState } from "react";
import { UploadReadingLine } from "@/components/features/channel-keys/upload-reading";
import { RunFields, type RunFieldValues } from "@/components/features/runs/run-fields";
import { VerdictMark } from "@/components/features/runs/verdict-mark";
import { UploadList } from "@/components/features/uploads/upload-list";
import { type UploadItem, useUploads } from "@/components/features/uploads/use-uploads";
import { Button } from "@/components/ui/action/button";
import { ApiError, callApi } from "@/lib/client/api";
import { roadDayRunsQuery } from "@/lib/client/road-day-runs";
import { freePlaces, type OrderCard } from "@/lib/compare/plan/order-card";
import { type AttachedRun, attachedRun, attachRunSchema } from "@/lib/services/runs/schema";

export interface DropLogsProps {
  roadDayId: string;
  revisions: { id: string; number: number; title: string }[];
  /** Which revision each side of the order card is, and the card. */
  sides: { A: string; B: string };
  card: OrderCard | null;
  /** How the two letters of a null test are called; null on every other road day. */
  letters: { A: string; B: string } | null;
  gears: number;
  /** Gear of the runs so far; prefilled. */
  gear: number | null;
  /** Why nothing can be attached now; null when it can. */
  blockedBecause: string | null;
}

/** Logs in their natural order by name, so that pull-2 comes before pull-10. */
const byName = new Intl.Collator("en", { numeric: true });

/** Letter of a null test at a place of the card; beyond the card that of its last place, as freePlaces has it. */
function letterAt(card: OrderCard | null, driveOrder: string): "A" | "B" {
  const places = card?.places ?? [];
  const place = places.find((candidate) => String(candidate.place) === driveOrder) ?? places.at(-1);
  return place?.side ?? "A";
}

/** The drop area: each log prefilled from the order card, attached one by one or all at once, judged while one looks on. */
export function DropLogs(props: DropLogsProps) {
  const { roadDayId, revisions, sides, card, letters, gears, gear, blockedBecause } = props;
  const uploads = useUploads("log");
  const client = useQueryClient();
  const runsQuery = roadDayRunsQuery(roadDayId);
  const { data } = useQuery(runsQuery);
  const [fields, setFields] = useState<Record<string, RunFieldValues>>({});
  const [keys, setKeys] = useState<Record<string, string | null>>({});
  const [made, setMade] = useState<Record<string, AttachedRun>>({});
  const change = (id: string, values: Partial<RunFieldValues>) =>
    setFields((all) => {
      const before = all[id];
      return before ? { ...all, [id]: { ...before, ...values } } : all;
    });

  const prefill = (items: readonly UploadItem[]) => {
    const open = uploads.items.filter((item) => item.phase !== "attached" && item.phase !== "refused");
    const taken = [
      ...(data?.runs ?? []).filter((run) => !run.setAside).map((run) => run.driveOrder),
      ...open.map((item) => Number(fields[item.id]?.driveOrder)),
    ].filter(Number.isFinite);
    const inOrder = [...items].sort((a, b) => byName.compare(a.file.name, b.file.name));
    const places = freePlaces(card, taken, inOrder.length);
    const filled = inOrder.flatMap((item, index) => {
      const place = places[index];
      if (!place) return [];
      const values: RunFieldValues = {
        revisionId: sides[place.side],
        driveOrder: String(place.place),
        leg: place.leg,
        kind: "pull",
        gear: gear === null ? "" : String(gear),
      };
      return [[item.id, values] as const];
    });
    setFields((all) => ({ ...all, ...Object.fromEntries(filled) }));
  };

  const attach = (item: UploadItem) =>
    uploads.attach(item, async (uploadId, idempotencyKey) => {
      const values = fields[item.id];
      const letter = letters && values ? letterAt(card, values.driveOrder) : null;
      const asked = attachRunSchema.safeParse({
        uploadId,
        roadDayId,
        ...values,
        letter,
        channelKeyId: keys[item.id] ?? null,
      });
      if (!asked.success) throw new Error(asked.error.issues[0]?.message ?? "Fill the fields in first.");
      try {
        const answer = await callApi("/api/runs", { method: "POST", json: asked.data, idempotencyKey });
        const run = attachedRun.parse(answer);
        setMade((all) => ({ ...all, [item.id]: run }));
        return `Attached as run ${run.number}.`;
      } catch (error) {
        if (error instanceof ApiError && typeof error.details.next === "number")
          change(item.id, { driveOrder: String(error.details.next) });
        throw error;
      } finally {
        void client.invalidateQueries({ queryKey: runsQuery.queryKey });
      }
    });

  const sent = uploads.items.filter((item) => item.phase === "sent");
  const attachAll = async () => {
    const place = (item: UploadItem) => Number(fields[item.id]?.driveOrder);
    for (const item of [...sent].sort((a, b) => place(a) - place(b))) await attach(item);
  };

  const cardSays = (values: RunFieldValues): string | null => {
    const place = card?.places.find((candidate) => String(candidate.place) === values.driveOrder);
    if (letters)
      return `Counts as ${letters[letterAt(card, values.driveOrder)]}: the order card has that at this place.`;
    if (!place) return null;
    const wanted = revisions.find((revision) => revision.id === sides[place.side]);
    if (values.revisionId === sides[place.side] && values.leg === place.leg) return null;
    return `The order card has R${wanted?.number ?? "?"} ${place.leg} at place ${place.place}.`;
  };

  return (
    <div className="flex flex-col gap-4">
      <UploadList
        uploads={uploads}
        purpose="log"
        title="Drop run logs here"
        hint="CSV or other delimited text, MDF 4, NMEA 0183 or GPX, plain or packed as .gz, many at once. Each is prefilled from the order card and can be changed."
        onAdded={prefill}
        renderFields={(item) => {
          const values = fields[item.id];
          return (
            values && (
              <div className="flex flex-col gap-3">
                {item.uploadId && (
                  <UploadReadingLine
                    uploadId={item.uploadId}
                    roadDayId={roadDayId}
                    fileName={item.file.name}
                    usedKeyId={keys[item.id] ?? null}
                    onUse={(key) => setKeys((all) => ({ ...all, [item.id]: key?.id ?? null }))}
                  />
                )}
                <RunFields
                  fileName={item.file.name}
                  values={values}
                  revisions={revisions}
                  gears={gears}
                  cardSays={cardSays(values)}
                  onChange={(changed) => change(item.id, changed)}
                />
              </div>
            )
          );
        }}
        renderOutcome={(item) => <Outcome run={made[item.id]} lines={data?.runs} />}
      />
      {uploads.items.some((item) => item.phase !== "attached") && (
        <Button
          look="filled"
          size="roadside"
          className="w-full sm:w-auto sm:self-start"
          disabled={sent.length === 0}
          blockedBecause={blockedBecause}
          onClick={() => void attachAll()}
        >
          {sent.length === 1 ? "Attach 1 run" : `Attach ${sent.length} runs`}
        </Button>
      )}
    </div>
  );
}

/** What came of an attached row: its run with the verdict as it arrives. */
function Outcome({
  run,
  lines,
}: {
  run: AttachedRun | undefined;
  lines:
    | readonly (Parameters<typeof VerdictMark>[0] & { id: string; why: string[]; next: string | null })[]
    | undefined;
}) {
  const line = run && lines?.find((candidate) => candidate.id === run.runId);
  if (!run) return null;
  return (
    <div className="flex flex-col gap-1" role="status">
      <p className="flex flex-wrap items-center gap-x-3">
        <Link href={`/runs/${run.runId}`} className="link font-semibold">
          Run {run.number}
        </Link>
        <VerdictMark verdict={line?.verdict ?? "waiting"} setAside={line?.setAside ?? false} />
        <Link href={`/runs/${run.runId}/channel-key` as Route} className="link">
          Choose columns
        </Link>
      </p>
      {line?.why.map((sentence) => (
        <p key={sentence}>{sentence}</p>
      ))}
      {line?.next && (
        <p>
          <strong>Next: </strong>
          {line.next}
        </p>
      )}
    </div>
  );
}
