import type { LogTable } from "@/lib/logs/types";
import { fixed } from "@/lib/measure/judge/words";
import type { Segments } from "@/lib/measure/run/find-segments";
import type { RunSignals, SampledChannel } from "@/lib/measure/run/run-signals";
import { between } from "@/lib/measure/speed/speed-model";
import type { Note, Span } from "@/lib/measure/types";
import { median } from "@/lib/signal/statistics";

/** Below this rate detail of the curve is lost; jitter of stamps must not turn 10 Hz into less. */
const FINE_RATE_HZ = 9.5;
/** Below this a speed channel tells no acceleration (campaign.md start value). */
const LEAST_FRESH_HZ = 4.75;
/** Steps farther than this share from the usual one count as uneven, and so many of them are told. */
const UNEVEN_STEP = 0.4;
const UNEVEN_SHARE = 0.05;
const RATE_CHANGE = 0.2;
/** measurement.md 7.5: beyond this share of repeats the steps of a channel are not white noise. */
const REPEATED_SHARE = 0.3;

const SPEEDS = [
  ["undriven", "undriven wheel speed"],
  ["gps", "GPS speed"],
  ["driven", "driven wheel speed"],
  ["engineSpeed", "engine speed"],
] as const;

/** Fresh samples a second by the usual distance between them; 0 for a channel that is absent. */
function freshRateHz(channel: SampledChannel | null): number {
  if (!channel || channel.times.length < 3) return 0;
  return 1 / median(channel.times.subarray(1).map((t, k) => t - channel.times[k]));
}

/** The highest fresh rate of all channels that tell speed. */
export function bestSpeedRateHz(signals: RunSignals): number {
  return Math.max(...SPEEDS.map(([name]) => freshRateHz(signals[name])));
}

/** True when some speed channel is fresh often enough for an acceleration. */
export function isFastEnough(signals: RunSignals): boolean {
  return bestSpeedRateHz(signals) >= LEAST_FRESH_HZ;
}

/** Findings about how the log was sampled: low rate, slow channels, uneven or changing steps. All warn. */
export function samplingNotes(table: LogTable, signals: RunSignals): Note[] {
  const notes: Note[] = [];
  if (signals.rateHz < FINE_RATE_HZ) {
    notes.push({
      code: "low_rate",
      consequence: "warned",
      message: `The log has ${fixed(signals.rateHz, 1)} rows a second. Narrow peaks of the curve are rounded off; log at 10 or more, better 25.`,
    });
  }
  for (const [name, label] of SPEEDS) {
    const rate = freshRateHz(signals[name]);
    if (rate === 0 || rate >= LEAST_FRESH_HZ) continue;
    notes.push({
      code: "slow_channel",
      consequence: "warned",
      message: `The ${label} brings ${fixed(rate, 1)} new values a second, too few to tell an acceleration; the faster channels carry it. Raise its rate in the logger.`,
    });
  }
  return [...notes, ...unevenSteps(table.timeS)];
}

function unevenSteps(timeS: Float64Array): Note[] {
  const steps = timeS.subarray(1).map((t, k) => t - timeS[k]);
  const half = steps.length >> 1;
  const [early, late] = [median(steps.subarray(0, half)), median(steps.subarray(half))];
  const changes = Math.abs(late / early - 1) > RATE_CHANGE;
  const usual = median(steps);
  // Longer steps are gaps and told as such.
  const ordinary = steps.filter((s) => s < 2.5 * usual);
  const uneven = ordinary.filter((s) => Math.abs(s - usual) > UNEVEN_STEP * usual).length / ordinary.length;
  const notes: Note[] = [];
  if (uneven > UNEVEN_SHARE && !changes) {
    notes.push({
      code: "jitter",
      consequence: "warned",
      message: `Of the rows, ${fixed(100 * uneven, 0)} % come more than ${100 * UNEVEN_STEP} % early or late against the usual ${fixed(1000 * usual, 0)} ms. If the stamps are the time of writing and not of measuring, speeds lie at wrong times; use a logger that stamps each sample.`,
    });
  }
  if (changes) {
    notes.push({
      code: "rate_changes",
      consequence: "warned",
      from_s: timeS[half],
      to_s: timeS[timeS.length - 1],
      message: `The rows come every ${fixed(1000 * early, 0)} ms in the first half of the log and every ${fixed(1000 * late, 0)} ms in the second. Check the logger's clock and its load.`,
    });
  }
  return notes;
}

/** Gaps of the recording inside the pull (masked) and inside coast-downs (warned: nothing is filled in). */
export function gapNotes(table: LogTable, { pull, coast }: Segments): Note[] {
  const overlaps = (span: Span | null, gap: { fromS: number; toS: number }) =>
    span !== null && gap.toS > span.from_s && gap.fromS < span.to_s;
  return table.time.gaps.flatMap((gap): Note[] => {
    const where = { code: "gap", from_s: gap.fromS, to_s: gap.toS };
    const length = fixed(gap.toS - gap.fromS, 2);
    if (overlaps(pull, gap)) {
      const message = `The recording has a gap of ${length} s inside the pull; the engine speeds in it are left out. Check the logger's memory and cable.`;
      return [{ ...where, consequence: "masked", message }];
    }
    if (!overlaps(coast, gap)) return [];
    const message = `The recording has a gap of ${length} s inside the coast-down; nothing is filled in, the losses rest on the rest of it.`;
    return [{ ...where, consequence: "warned", message }];
  });
}

/** Speed channels that repeat their last value in more than 30 % of their samples within the pull, where speed can't stand still. */
export function repeatNotes(signals: RunSignals, { pull }: Segments): Note[] {
  if (!pull) return [];
  return SPEEDS.flatMap(([name, label]): Note[] => {
    const channel = signals[name];
    if (!channel) return [];
    const [a, b] = between(channel, pull.from_s, pull.to_s);
    let repeats = 0;
    for (let i = a + 1; i < b; i++) if (channel.values[i] === channel.values[i - 1]) repeats++;
    const share = repeats / Math.max(1, b - a - 1);
    if (b - a < 20 || share <= REPEATED_SHARE) return [];
    return [
      {
        code: "repeated_samples",
        consequence: "warned",
        ...pull,
        message: `The ${label} repeats its last value in ${fixed(100 * share, 0)} % of its samples during the pull: its steps are coarse, or it is slower than the log. Fine detail in the curve may come from the steps; log it finer where the logger can.`,
      },
    ];
  });
}
