/** Where the run's own log is good and only its reading is in doubt: nothing needs to be driven or dropped again. */
const BY_CHOOSING: Readonly<Record<string, string>> = {
  ambiguous_decimal: "Say on Choose columns what the decimal mark is; the run is judged again.",
  speed_units_disagree:
    "State the units of both speeds on Choose columns, or leave the wrong one out there; the run is judged again.",
  speed_implausible: "State the unit of the speed on Choose columns; the run is judged again.",
};

/** What a tester does about a refused log, by the code of its first reason. Unknown codes get the general advice. */
const NEXT: Readonly<Record<string, string>> = {
  empty_file: "Export the log again and drop it on the road-day page.",
  no_data_rows: "Export the log again and drop it on the road-day page.",
  gzip_damaged: "Export the log again and drop it on the road-day page.",
  not_text: "Export the log as delimited text (CSV) and drop it on the road-day page.",
  format_not_supported: "Export the log as delimited text (CSV) and drop it on the road-day page.",
  no_time_column:
    "Name the time column on Choose columns if it is there, else switch the time column on in the logger's export and drop the new file on the road-day page.",
  time_not_increasing: "Export the log again with its own time stamps, one recording a file.",
  non_numeric_values:
    "Export numbers only, without texts in the columns, and drop the new file on the road-day page.",
  too_few_samples: "Record longer, at 5 Hz or more, and drive this place again.",
  rate_too_low: "Set the logger to 5 rows a second or more, better 20, and drive this place again.",
  engine_speed_not_known: "Log engine speed, or write a speed at an engine speed into the vehicle sheet.",
  too_many_missing: "Check the sensor's cable, then drive this place again.",
  no_speed_channel:
    "Say on Choose columns which column is a road speed if one is there, else switch on a road-speed channel (a wheel or satellite speed) and drive this place again.",
  speed_all_zero: "Check the speed sensor: it recorded zero throughout. Then drive this place again.",
  no_pull_found: "Drive this place again: full throttle in one gear to near the red line.",
  no_full_load: "Drive this place again with the pedal fully down.",
  pull_too_short: "Drive this place again from lower revolutions to near the red line.",
  no_coast_found: "Drive this place again and let the car roll in neutral after the pull.",
  no_sprint_found: "Drive this place again: stand still, then accelerate through the whole range.",
  analysis_fault:
    "Set the run aside and attach the log again after the next version; tell whoever runs this installation.",
};

const OTHERWISE = "Look at the reason, mend the recording, and drop the new log on the road-day page.";

/** Plain sentences: the way on, and that the refused run must make room first. */
export function nextStep(code: string | undefined): string {
  const chosen = code && BY_CHOOSING[code];
  if (chosen) return chosen;
  return `${(code && NEXT[code]) ?? OTHERWISE} Set this run aside first, so that its place is free.`;
}
