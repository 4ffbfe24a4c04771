import { FileRefusedError } from "@/lib/errors";
import { type LogChannel, ROAD_SPEEDS } from "@/lib/logs/types";

const MOTION = new Set<string>([...ROAD_SPEEDS, "engine_speed"]);
/** Above this share of missing cells a channel is only sound if its samples come at a steady, slower rate. */
const MAX_MISSING_SHARE = 0.9;
/** A steady slower channel has at least this share of its spacings within a quarter of the median (random ones: 17 %). */
const STEADY_SHARE = 0.5;
const FEWEST_SPACINGS = 9;

/** True when a channel is mostly missing and what is there does not come at a steady rate of its own. */
function isMostlyMissing(timeS: Float64Array, values: Float64Array): boolean {
  let present = 0;
  for (const value of values) if (!Number.isNaN(value)) present++;
  if (values.length === 0 || present >= (1 - MAX_MISSING_SHARE) * values.length) return false;
  const spacing: number[] = [];
  let last = Number.NaN;
  for (let i = 0; i < values.length; i++) {
    if (Number.isNaN(values[i])) continue;
    const t = timeS[i] ?? 0;
    if (!Number.isNaN(last)) spacing.push(t - last);
    last = t;
  }
  if (spacing.length < FEWEST_SPACINGS) return true;
  const median = Float64Array.from(spacing).sort()[spacing.length >> 1] ?? 0;
  const near = spacing.filter((step) => Math.abs(step - median) <= 0.25 * median).length;
  return near < STEADY_SHARE * spacing.length;
}

/** Refuses a log in which every speed channel (or, without one, every channel) is mostly missing: `too_many_missing`. */
export function checkMissing(timeS: Float64Array, channels: readonly LogChannel[]): void {
  const motion = channels.filter((channel) => channel.channel !== null && MOTION.has(channel.channel));
  const judged = motion.length > 0 ? motion : channels;
  if (
    judged.length === 0 ||
    !judged.every((channel) => isMostlyMissing(channel.timeS ?? timeS, channel.values))
  )
    return;
  throw new FileRefusedError(
    "too_many_missing",
    `More than ${MAX_MISSING_SHARE * 100} % of the values of ${judged.map((channel) => `"${channel.column}"`).join(", ")} are missing. Check the logger's connection, then record again.`,
  );
}
