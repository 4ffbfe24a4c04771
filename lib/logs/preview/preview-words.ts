import { channelWords } from "@/lib/logs/channels/channel-words";
import type { LogPreview } from "@/lib/logs/preview/preview-log";

/** A preview in a few words for one line: what was found, what is left out, what is in doubt. */
export function previewWords({ columns, notRead, problems, refusal }: LogPreview) {
  const inDoubt = problems.filter((problem) => !PLAIN.has(problem.code)).map((problem) => problem.message);
  const odd = columns.flatMap(({ plausible }) =>
    plausible && !plausible.looksRight ? [plausible.sentence] : [],
  );
  return {
    found: columns.flatMap(({ role, channel }) =>
      role === "channel" && channel ? [channelWords(channel)] : [],
    ),
    leftOut: [
      ...columns
        .filter(({ role, channel }) => role === "text" || (role === "free" && channel === null))
        .map(({ title }) => title),
      ...notRead,
    ],
    /** What else was found; it leaves nothing to choose. */
    remarks: problems
      .filter(({ code }) => PLAIN.has(code) && code !== "implausible_values")
      .map(({ message }) => message),
    inDoubt: [...(refusal ? [refusal.message] : []), ...inDoubt, ...odd],
  };
}

/** Findings that leave nothing to choose: what the recording is like, or told in the column's own line. Any other is a doubt. */
const PLAIN = new Set([
  "channel_left_out",
  "fix_missing",
  "gaps",
  "group_left_out",
  "implausible_values",
  "midnight_passed",
  "other_lines",
  "points_left_out",
  "preamble",
  "repeated_header",
  "repeated_time",
  "rows_out_of_order",
  "rows_without_time",
  "several_segments",
  "speed_from_positions",
  "text_channels_left_out",
  "time_jumps_back",
  "time_unit_stated",
]);
