import type { FoundColumn } from "@/db/schema/change-sets";
import type { CoverageChannel, CoverageRun } from "@/lib/calibration/coverage/types";
import type { LogTable } from "@/lib/logs/types";

/** Columns of a log that an axis can be linked to. */
export function foundColumns({ channels }: LogTable): FoundColumn[] {
  return channels.map(({ column, channel, unit }) => ({ title: column, channel, unit }));
}

/** A run's log as coverage reads it: each column under its title and its free name, and under the channel that it is, best first. */
export function coverageRun(run: { id: string }, log: LogTable): CoverageRun {
  const channels = new Map<string, CoverageChannel>();
  for (const { column, channel, name, unit, values, timeS } of log.channels) {
    const samples = { values, unit, ...(timeS && { timeS }) };
    for (const key of [channel, name, column])
      if (key != null && !channels.has(key)) channels.set(key, samples);
  }
  return { id: run.id, timeS: log.timeS, channels };
}
