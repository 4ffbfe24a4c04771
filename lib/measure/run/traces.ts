import type { RefusedRow } from "@/lib/logs/types";
import type { Span } from "@/lib/measure/types";

/** One channel of a run thinned for drawing; `values` has the length of `timeS`, null = gap. */
export interface TraceChannel {
  channel: string;
  label: string;
  unit: string;
  values: (number | null)[];
}

/** Thinned channels of one run on one time axis (s from the log's start), for the run page. */
export interface RunTraces {
  timeS: number[];
  channels: TraceChannel[];
  segments: { pull?: Span; coast?: Span; sprint?: Span };
  /** Rows of the log that the run went on without; absent where there are none. */
  refusedRows?: RefusedRows;
}

/** Rows that were refused while the log was read. */
export interface RefusedRows {
  total: number;
  /** There are more than were counted. */
  atLeast: boolean;
  /** The first five. */
  first: RefusedRow[];
}
