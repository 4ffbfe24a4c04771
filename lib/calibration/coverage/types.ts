/** Which run channel moves along an axis, by the axis's input quantity; remembered per programme. */
export interface AxisLink {
  /** Input quantity of the description, or `NAME/x` for an axis without one. */
  quantity: string;
  /** A known channel of the log reader, or a column title of the log. */
  channel: string;
  /** How it came to be: by name, by what the title means, or chosen by a person. */
  by: "column" | "title" | "hand";
}

/** Samples of one run for coverage: same length, NaN = missing; only where the run is usable. */
export interface CoverageRun {
  id: string;
  timeS: Float64Array;
  /** By the `channel` of a link, in the unit given. */
  channels: ReadonlyMap<string, { values: Float64Array; unit: string }>;
}

export interface MapCoverage {
  name: string;
  /** Cells by axis, x first; time per cell in s, weight shared among the cells that interpolation uses; x fastest. */
  dims: number[];
  secondsByCell: number[];
  /** How many separate visits each cell had (entries after at least 0.5 s away), over all runs. */
  visitsByCell: number[];
  /** Seconds beyond the ends of the axes, where interpolation holds the last cell. */
  secondsOutside: number;
  changedCells: number;
  changedVisited: number;
  /** Cell numbers (x fastest) that changed and were never visited. */
  changedNeverVisited: number[];
  /** Links used, by axis. */
  links: (AxisLink | null)[];
}

export interface Coverage {
  coverage: 1;
  runs: string[];
  maps: MapCoverage[];
  /** Changed characteristics whose coverage can't be told, and why (one value, axis without a link, channel not recorded …). */
  notTold: { name: string; changedCells: number; reason: string }[];
  changedCells: number;
  changedVisited: number;
}
