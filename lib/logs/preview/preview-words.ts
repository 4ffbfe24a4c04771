import { channelWords } from "@/lib/logs/channel-words";
import type { LogPreview } from "@/lib/logs/preview/preview-log";

/** A preview in a few words for one line: what was found, what is left out, what is in doubt. */
export function previewWords({ columns, problems, refusal }: LogPreview) {
  const inDoubt = problems.filter((problem) => DOUBTS.has(problem.code)).map((problem) => problem.message);
  const odd = columns.flatMap(({ plausible }) =>
    plausible && !plausible.looksRight ? [plausible.sentence] : [],
  );
  return {
    found: columns.flatMap(({ role, channel }) =>
      role === "channel" && channel ? [channelWords(channel)] : [],
    ),
    leftOut: columns.filter(({ role }) => role === "free" || role === "text").map(({ title }) => title),
    inDoubt: [...(refusal ? [refusal.message] : []), ...inDoubt, ...odd],
  };
}

/** Findings about which the file leaves a choice that a person can make. */
const DOUBTS = new Set([
  "unit_unknown",
  "unit_does_not_fit",
  "axle_drive_unknown",
  "speed_kind_assumed",
  "second_column_of_channel",
  "time_unit_assumed",
  "pressure_taken_as_absolute",
  "pressure_taken_as_gauge",
  "key_column_not_found",
  "text_in_column",
  "rows_refused",
]);
