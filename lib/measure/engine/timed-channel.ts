import { sampledChannel } from "@/lib/measure/run/run-signals";
import type { Span } from "@/lib/measure/types";
import { lowerBound } from "@/lib/signal/local-quadratic";

/** Samples further apart than this are not joined, s. */
const LONGEST_JOIN_S = 1;

/** A channel as straight lines between its fresh samples. */
export interface TimedChannel {
  /** Mean over a span; null where a part of it is not covered. */
  meanBetween: (fromS: number, toS: number) => number | null;
  /** Means over `holdS` around each sample of the stretches, cut at their ends. */
  heldMeans: (stretches: readonly Span[], holdS: number) => { t: number; value: number }[];
  /** Value at a time; null outside and in gaps. */
  at: (t: number) => number | null;
}

/** Reads a column (one value a row, NaN = missing) as a function of time; null with fewer than two samples. */
export function timedChannel(timeS: Float64Array, rows: Float64Array): TimedChannel | null {
  const channel = sampledChannel(timeS, rows);
  if (!channel) return null;
  const { times, values } = channel;
  const at = (t: number): number | null => {
    const i = lowerBound(times, t);
    if (times[i] === t) return values[i];
    if (i === 0 || i === times.length || times[i] - times[i - 1] > LONGEST_JOIN_S) return null;
    return values[i - 1] + ((t - times[i - 1]) / (times[i] - times[i - 1])) * (values[i] - values[i - 1]);
  };
  return {
    at,
    meanBetween: (fromS, toS) => {
      let before = at(fromS);
      let since = fromS;
      let sum = 0;
      for (let i = lowerBound(times, fromS); i < times.length && times[i] < toS; i++) {
        if (before === null || times[i] - since > LONGEST_JOIN_S) return null;
        sum += ((before + values[i]) / 2) * (times[i] - since);
        before = values[i];
        since = times[i];
      }
      const last = at(toS);
      if (before === null || last === null || toS <= fromS) return null;
      return (sum + ((before + last) / 2) * (toS - since)) / (toS - fromS);
    },
    heldMeans: (stretches, holdS) => {
      const out: { t: number; value: number }[] = [];
      for (const { from_s, to_s } of stretches) {
        for (let i = lowerBound(times, from_s); i < times.length && times[i] <= to_s; i++) {
          const first = lowerBound(times, Math.max(from_s, times[i] - holdS / 2));
          let sum = 0;
          let n = 0;
          for (let j = first; j < times.length && times[j] <= Math.min(to_s, times[i] + holdS / 2); j++) {
            sum += values[j];
            n++;
          }
          out.push({ t: times[i], value: sum / n });
        }
      }
      return out;
    },
  };
}
