import type { Transaction } from "@/db/client";
import { lockRunsWithHeader, selectChannelKey, setRunChannelKey } from "@/db/queries/channel-keys";
import { selectCitingRecords } from "@/db/queries/run-analyses";
import { lockRun, type RunRow } from "@/db/queries/runs";
import { InvalidInputError, NotFoundError } from "@/lib/errors";
import { enqueueJob } from "@/lib/jobs/enqueue";
import { headerOfRun } from "@/lib/services/channel-keys/run-head";
import type { AppliedKey, ApplyChannelKey } from "@/lib/services/channel-keys/schema";
import { type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadProgramme } from "@/lib/services/programmes/load";
import { refuseArchived } from "@/lib/services/programmes/refuse-archived";
import { loadRun } from "@/lib/services/runs/load";
import { citedSentence, refuseCited } from "@/lib/services/runs/refuse-cited";

/** @throws InvalidInputError `key_does_not_fit` when the key is of another header; NotFoundError */
export async function requireFitting(ctx: Ctx, channelKeyId: string, headerSha256: string | null) {
  const row = await selectChannelKey(ctx.db, { workspaceId: ctx.workspaceId, channelKeyId });
  if (!row) throw new NotFoundError("no_channel_key", "There is no such channel key here.");
  if (row.headerSha256 !== headerSha256)
    throw new InvalidInputError(
      "key_does_not_fit",
      `Key "${row.name}" was made for another header than this log has. Choose the columns of this log on their own.`,
    );
  return row;
}

/**
 * Has a run, or every run of its programme with the same header, read with a key and judged again, in the caller's transaction.
 * Of several runs those that a final decision rests on stay as they are; a single one is refused.
 * @throws ConflictError `run_cited`
 */
export async function applyToRuns(
  tx: Transaction,
  ctx: Ctx,
  args: { run: RunRow; headerSha256: string | null; channelKeyId: string | null; everyRun: boolean },
): Promise<AppliedKey> {
  const { run, headerSha256, channelKeyId, everyRun } = args;
  const { workspaceId } = ctx;
  const { programmeId, id: runId } = run;
  const same =
    everyRun && headerSha256 !== null
      ? await lockRunsWithHeader(tx, { workspaceId, headerSha256, programmeId })
      : [];
  const own = same.find((other) => other.id === runId) ?? (await lockRun(tx, { workspaceId, runId }));
  const others = same.filter((other) => other.id !== run.id);
  await refuseCited(tx, ctx, `Run ${run.number}`, [run.id]);
  const citing = await selectCitingRecords(tx, { workspaceId, runIds: others.map((other) => other.id) });
  const isCited = ({ id, number }: RunRow) =>
    citedSentence(
      `Run ${number}`,
      citing.filter((row) => row.runId === id),
    ) !== null;
  const judgedAgain: number[] = [];
  for (const { id, number } of [...(own ? [own] : []), ...others.filter((other) => !isCited(other))]) {
    if (!(await setRunChannelKey(tx, { workspaceId, runId: id, channelKeyId }))) continue;
    await enqueueJob(tx, { name: "judge-run", data: { workspaceId, runId: id } });
    judgedAgain.push(number);
  }
  const sorted = (numbers: number[]) => numbers.sort((a, b) => a - b);
  return {
    judgedAgain: sorted(judgedAgain),
    cited: sorted(others.filter(isCited).map(({ number }) => number)),
  };
}

/**
 * Has a run read with a saved version of the key for its header, or with none.
 * @throws ForbiddenError; NotFoundError; InvalidInputError `key_does_not_fit`; ConflictError `run_cited`
 */
export async function applyChannelKey(ctx: Ctx, input: ApplyChannelKey): Promise<AppliedKey> {
  const run = await loadRun(ctx, input.runId, "channel_key.save");
  const headerSha256 = await headerOfRun(ctx, run);
  return await withTransaction(ctx, async (tx, inner) => {
    const { programme } = await loadProgramme(inner, run.programmeId);
    refuseArchived(programme);
    const { channelKeyId, everyRun } = input;
    const key = channelKeyId === null ? null : await requireFitting(inner, channelKeyId, headerSha256);
    const applied = await applyToRuns(tx, inner, { run, headerSha256, channelKeyId, everyRun });
    await appendLedger(tx, inner, {
      event: "channel_key.applied",
      subjectType: "run",
      subjectId: run.id,
      programmeId: run.programmeId,
      data: {
        number: run.number,
        name: key?.name ?? null,
        version: key?.version ?? null,
        runs: applied.judgedAgain,
      },
    });
    return applied;
  });
}
