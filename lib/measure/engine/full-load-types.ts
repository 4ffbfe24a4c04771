/** Engine channels that are looked at under full load. Absolute and gauge manifold pressure are different channels. */
export const ENGINE_CHANNELS = [
  "lambda",
  "knock_retard",
  "exhaust_temperature",
  "manifold_pressure",
  "manifold_pressure_gauge",
  "intake_temperature",
  "coolant_temperature",
  "injector_duty",
] as const;
export type EngineChannel = (typeof ENGINE_CHANNELS)[number];

/** Unit of each channel's values, as in the logs. */
export const ENGINE_UNITS: Readonly<Record<EngineChannel, "1" | "°" | "°C" | "kPa" | "%">> = {
  lambda: "1",
  knock_retard: "°",
  exhaust_temperature: "°C",
  manifold_pressure: "kPa",
  manifold_pressure_gauge: "kPa",
  intake_temperature: "°C",
  coolant_temperature: "°C",
  injector_duty: "%",
};

/** One value a grid point; null = not covered. */
type Series = (number | null)[];

/** The lowest or highest value that held for 0.3 s, and where. */
export interface Extreme {
  value: number;
  rpm: number | null;
  at_s: number;
}

/** One channel of one pull. Values in the unit of `ENGINE_UNITS`. */
export interface ChannelAtLoad {
  /** Mean over the time spent around each grid point; null = not covered. */
  values: Series;
  mean: number;
  min: Extreme;
  max: Extreme;
  /** Mean of the last half second before full load, of the last one under it, and their difference. */
  start: number | null;
  end: number | null;
  rise: number | null;
}

/** How far manifold pressure shot over what it should have been. */
export interface BoostAtLoad {
  channel: "manifold_pressure" | "manifold_pressure_gauge";
  /** Null with `why`: nothing to hold the peak against. */
  overshoot_kpa: number | null;
  reference: "target" | "plateau" | null;
  peak_kpa: number;
  against_kpa: number | null;
  at_rpm: number | null;
  why?: string;
}

/** Engine channels of one pull; what the log does not carry is listed as not recorded. */
export interface RunFullLoad {
  /** From tip-in to lift. */
  load_s: number;
  rpm: number[];
  channels: Partial<Record<EngineChannel, ChannelAtLoad>>;
  /** Absent for naturally aspirated engines and where no manifold pressure is logged. */
  boost?: BoostAtLoad;
  not_recorded: EngineChannel[];
}

/** A side's extreme with the run it comes from. */
export interface SideExtreme extends Extreme {
  run: string;
}

/** One channel over the runs of a side that carry it. */
export interface SideChannel {
  n: number;
  /** Mean over runs, where at least half of them have a value. */
  values: Series;
  min: SideExtreme;
  max: SideExtreme;
  mean_rise: number | null;
}

/** Engine channels of a side's usable pulls. */
export interface SideFullLoad {
  rpm: number[];
  longest_load_s: number;
  channels: Partial<Record<EngineChannel, SideChannel>>;
  /** Highest overshoot of the runs that tell one. */
  boost?: { n: number; overshoot_kpa: number; run: string; reference: "target" | "plateau" };
  not_recorded: EngineChannel[];
}

/** B − A of one channel, in its unit; the band is simultaneous over this channel's curve. */
export interface ChannelDifference {
  n_a: number;
  n_b: number;
  rpm: number[];
  difference: Series;
  low: Series;
  high: Series;
  level: number;
  simultaneous: boolean;
  method: string;
  /** Of the value that counts as worst (lowest or highest): each side's, the plain difference, and that of the runs' mean with ±. */
  worst: {
    of: "min" | "max";
    a: number;
    b: number;
    difference: number;
    mean_difference: number;
    half_width: number | null;
  };
}
