import {
  ATMOSPHERE_KPA,
  FOOT_M,
  FPS_MPS,
  INHG_KPA,
  KMH_MPS,
  KNOT_MPS,
  MILE_M,
  MMHG_KPA,
  MPH_MPS,
  PSI_KPA,
  RADIAN_DEG,
  RPM_RADPS,
  STANDARD_GRAVITY_MPS2,
  TECHNICAL_ATMOSPHERE_KPA,
  ZERO_CELSIUS_K,
} from "@/lib/units/constants";

/** Canonical units: s, m/s, 1/min, %, kPa, °C, °, m, m/s², 1. */
export type Dimension =
  | "time"
  | "speed"
  | "rotation"
  | "ratio"
  | "pressure"
  | "temperature"
  | "angle"
  | "length"
  | "acceleration"
  | "number";

/** How a value in the written unit becomes canonical: `canonical = value × factor + offset`. */
export interface ParsedUnit {
  dimension: Dimension;
  factor: number;
  /** Added after the factor; never applied to a difference of two values. */
  offset: number;
  /** Pressure only: what the unit text says about the zero point, or null when it says nothing. */
  reference: "absolute" | "gauge" | null;
}

const unit = (dimension: Dimension, factor: number, offset = 0): ParsedUnit => ({
  dimension,
  factor,
  offset,
  reference: null,
});

const SPELLINGS: readonly [ParsedUnit, string][] = [
  [
    unit("time", 1),
    "s sec secs second seconds sek sekunden seconde secondes secondi segundo segundos seconden sekunder sekund sekundy",
  ],
  [unit("time", 1e-3), "ms msec millisecond milliseconds millis"],
  [unit("time", 1e-6), "us μs µs usec microseconds"],
  [unit("time", 1e-9), "ns nanoseconds"],
  [unit("time", 60), "min minute minutes minuten"],
  [unit("time", 3600), "h hr hour hours stunden"],
  [unit("speed", 1), "m/s mps meterspersecond meters/second m/sec"],
  [unit("speed", KMH_MPS), "km/h kmh kph kmph km/hr km/std km/u km/t km/tim km/godz km/hod"],
  [unit("speed", MPH_MPS), "mph mi/h mile/h miles/h milesperhour miles/hour"],
  [unit("speed", KNOT_MPS), "kn kt kts knot knots knoten"],
  [unit("speed", FPS_MPS), "ft/s fps"],
  [
    unit("rotation", 1),
    "rpm 1/min min-1 min^-1 /min r/min rev/min u/min upm umin tr/min trs/min tours/min giri/min omw/min toeren/min t/min varv/min v/min rot/min obr/min obr./min ot/min ot./min",
  ],
  [unit("rotation", 60), "1/s rps rev/s hz"],
  [unit("rotation", 1 / RPM_RADPS), "rad/s"],
  [
    unit("ratio", 1),
    "% pct percent prozent procent procenta pourcent pourcentage porcentaje porcentagem percento",
  ],
  [unit("pressure", 1e-3), "pa"],
  [unit("pressure", 0.1), "hpa mbar millibar"],
  [unit("pressure", 1), "kpa"],
  [unit("pressure", 1000), "mpa"],
  [unit("pressure", 100), "bar"],
  [unit("pressure", PSI_KPA), "psi lb/in2 lbf/in2 lbs/in2"],
  [unit("pressure", INHG_KPA), "inhg inhg0c"],
  [unit("pressure", MMHG_KPA), "mmhg"],
  [unit("pressure", ATMOSPHERE_KPA), "atm"],
  [unit("pressure", TECHNICAL_ATMOSPHERE_KPA), "kgf/cm2 kg/cm2"],
  [unit("temperature", 1), "°c c degc deg.c celsius gradc degcelsius °celsius gradcelsius"],
  [unit("temperature", 5 / 9, -160 / 9), "°f f degf deg.f fahrenheit °fahrenheit"],
  [unit("temperature", 1, -ZERO_CELSIUS_K), "k kelvin degk"],
  [
    unit("angle", 1),
    "° deg degs degree degrees grad °kw °ca °crk °btdc degbtdc degca degcrk °kurbelwinkel °v.ot °vot °vil °dv grados gradi graden grader stopnie stupně °avpmh",
  ],
  [unit("angle", RADIAN_DEG), "rad"],
  [unit("length", 1), "m metre metres meter meters mètre mètres metro metros metri"],
  [unit("length", 1000), "km"],
  [unit("length", FOOT_M), "ft foot feet"],
  [unit("length", MILE_M), "mi mile miles"],
  [unit("acceleration", 1), "m/s2 m/s^2 mps2 m/s/s m/sec2 m/sec^2"],
  [unit("acceleration", STANDARD_GRAVITY_MPS2), "g gn"],
  [unit("number", 1), "- 1 – — λ lambda none"],
];

const TABLE = new Map<string, ParsedUnit>();
for (const [parsed, names] of SPELLINGS) for (const name of names.split(" ")) TABLE.set(name, parsed);

const PRESSURE_REFERENCE =
  /^(.*?)[\s(._-]*(abs|absolute|absolut|absolue|absoluta|assoluta|a|g|gauge|rel|relativ|relative|relativa|ü)\.?\)?$/;

function fold(text: string): string {
  // The masculine ordinal is a common slip for the degree sign; NFKC turns ² into 2 and a superscript minus into U+2212.
  return text
    .replaceAll("º", "°")
    .normalize("NFKC")
    .toLowerCase()
    .replace(/[\s·]+/g, "")
    .replaceAll("\u2212", "-")
    .replaceAll("**", "^");
}

/**
 * Reads a unit as written in a log (`km/h`, `lb/in²`, `°F`, `bar abs`, `1/min`); letter case and blanks don't matter.
 * Returns null for an empty or unknown text: an unknown unit is never guessed.
 */
export function parseUnit(text: string | null | undefined): ParsedUnit | null {
  if (text == null) return null;
  const folded = fold(text);
  if (folded === "") return null;
  const direct = TABLE.get(folded);
  if (direct) return direct;
  const match = PRESSURE_REFERENCE.exec(folded);
  const base = match ? TABLE.get(match[1] ?? "") : undefined;
  if (match && base?.dimension === "pressure") {
    return { ...base, reference: (match[2] ?? "").startsWith("a") ? "absolute" : "gauge" };
  }
  return null;
}

/** Converts in place of a copy: `value × factor + offset`, NaN stays NaN. Scale points carry the offset. */
export function toCanonical(value: number, from: ParsedUnit): number {
  return value * from.factor + from.offset;
}

/** Converts a difference of two values (a band, a step, a standard deviation): the offset must not be added. */
export function differenceToCanonical(difference: number, from: ParsedUnit): number {
  return difference * from.factor;
}
