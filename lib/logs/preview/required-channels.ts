import { ROAD_SPEEDS } from "@/lib/logs/types";

/** What a kind of run can't do without; the names are those of the run itself. */
export type RequiringKind = "pull" | "coast-down" | "sprint";

/** A need of a kind of run, met by any of its channels. */
export interface Requirement {
  anyOf: readonly string[];
  words: string;
}

/**
 * What a run of this kind needs beside time.
 * @param engineSpeedFromSheet the vehicle sheet tells engine speed from road speed
 */
export function requiredChannels(kind: RequiringKind, engineSpeedFromSheet: boolean): Requirement[] {
  const speed = { anyOf: ROAD_SPEEDS, words: "a road speed (undriven wheel, GPS or driven wheel)" };
  if (kind !== "pull" || engineSpeedFromSheet) return [speed];
  return [{ anyOf: ["engine_speed"], words: "engine speed" }, speed];
}

/** One plain sentence that names what is missing; null when nothing is. */
export function whatIsMissing(
  requirements: readonly Requirement[],
  found: { time: boolean; channels: ReadonlySet<string> },
): string | null {
  const missing = requirements
    .filter(({ anyOf }) => !anyOf.some((channel) => found.channels.has(channel)))
    .map(({ words }) => words);
  if (!found.time) missing.unshift("a time column");
  if (missing.length === 0) return null;
  return `Still missing: ${missing.join(", ")}. Say which column holds it.`;
}
