import { channelOf } from "@/lib/logs/titles/known-titles";
import { choiceOf, foldTitle, isTimePhrase, meaningOf } from "@/lib/logs/titles/title-meaning";
import type { KnownChannel } from "@/lib/logs/types";
import type { Dimension } from "@/lib/units/unit-text";
import { parseUnit } from "@/lib/units/unit-text";

/** What a column title says, before any value is looked at. */
export interface TitleReading {
  channel: KnownChannel | null;
  /** Unit text taken from the title, or null. */
  unitText: string | null;
  /** "front" or "rear" wheels: driven or not depends on the vehicle. */
  axle: "front" | "rear" | null;
  /** A speed whose kind the title does not say. */
  speedKindOpen: boolean;
  /** Pressure only: what the title says about the zero point. */
  pressureReference: "absolute" | "gauge" | null;
  /** A pressure title that usually means gauge pressure but does not say so. */
  boostWord: boolean;
  /** Without a unit the title may mean something else. */
  needsUnit: boolean;
  /** A word beside the channel's that is not understood: the channel is then a question, not an answer. */
  unknownWord: string | null;
  /** Two things that the title can be, in words, where it is ambiguous. */
  choice: string | null;
}

/** Dimension that a known channel must have, its canonical unit, and what a missing unit means (null = doubt). */
export const CHANNEL_UNITS: Readonly<
  Record<
    KnownChannel,
    { dimension: Dimension; unit: string; withoutUnit: string | null; plausible: [number, number] }
  >
> = {
  time: { dimension: "time", unit: "s", withoutUnit: null, plausible: [-1e18, 1e18] },
  wheel_speed_undriven: { dimension: "speed", unit: "m/s", withoutUnit: null, plausible: [-5, 150] },
  wheel_speed_driven: { dimension: "speed", unit: "m/s", withoutUnit: null, plausible: [-5, 150] },
  gps_speed: { dimension: "speed", unit: "m/s", withoutUnit: null, plausible: [-5, 150] },
  engine_speed: { dimension: "rotation", unit: "1/min", withoutUnit: "1/min", plausible: [0, 25_000] },
  pedal: { dimension: "ratio", unit: "%", withoutUnit: "%", plausible: [-5, 110] },
  throttle: { dimension: "ratio", unit: "%", withoutUnit: "%", plausible: [-5, 110] },
  manifold_pressure: { dimension: "pressure", unit: "kPa", withoutUnit: null, plausible: [5, 800] },
  manifold_pressure_gauge: { dimension: "pressure", unit: "kPa", withoutUnit: null, plausible: [-110, 700] },
  lambda: { dimension: "number", unit: "1", withoutUnit: "1", plausible: [0.3, 40] },
  ignition_advance: { dimension: "angle", unit: "°", withoutUnit: "°", plausible: [-60, 80] },
  knock_retard: { dimension: "angle", unit: "°", withoutUnit: "°", plausible: [-30, 30] },
  intake_temperature: { dimension: "temperature", unit: "°C", withoutUnit: null, plausible: [-60, 300] },
  coolant_temperature: { dimension: "temperature", unit: "°C", withoutUnit: null, plausible: [-60, 200] },
  exhaust_temperature: { dimension: "temperature", unit: "°C", withoutUnit: null, plausible: [-60, 1300] },
  gear: { dimension: "number", unit: "1", withoutUnit: "1", plausible: [-2, 20] },
  latitude: { dimension: "angle", unit: "deg", withoutUnit: "deg", plausible: [-90, 90] },
  longitude: { dimension: "angle", unit: "deg", withoutUnit: "deg", plausible: [-180, 180] },
  altitude: { dimension: "length", unit: "m", withoutUnit: null, plausible: [-500, 9000] },
  longitudinal_acceleration: {
    dimension: "acceleration",
    unit: "m/s²",
    withoutUnit: null,
    plausible: [-50, 50],
  },
};

/** Letters of an axle, beside a word for wheel only. */
const FRONT_LETTERS = new Set(["f", "fl", "fr", "va", "vl", "vr", "v"]);
const REAR_LETTERS = new Set(["r", "rl", "rr", "ha", "hl", "hr", "h"]);
/** Whole titles of one letter. */
const LETTER_TITLES: Readonly<Record<string, KnownTitle>> = {
  n: { channel: "engine_speed" },
  v: { channel: "wheel_speed_driven", speedKindOpen: true },
};
const TIME =
  /^((device|gps|utc|local|log|elapsed|relative|session) )?(time|zeit)\b|^(elapsed|timestamp|uhrzeit|clock|zeitstempel)\b|^t$/;

/** Splits `Name [unit]`, `Name (unit)` or `name_unit` into the name and the unit text. */
export function splitTitle(title: string): { name: string; unitText: string | null } {
  const bracket = /^(.*?)\s*[[({]\s*([^\])}]*)\s*[\])}]\s*$/.exec(title);
  if (bracket && (bracket[1] ?? "") !== "") {
    return { name: bracket[1] ?? "", unitText: (bracket[2] ?? "") === "" ? null : (bracket[2] ?? null) };
  }
  const suffix = /^(.+?)[_\s]([a-z0-9/°%²]+)$/i.exec(title.trim());
  if (suffix?.[1] && suffix[2] && parseUnit(suffix[2]) !== null)
    return { name: suffix[1], unitText: suffix[2] };
  const hump = /^(|.*[a-z])(mps|kmh|kph|mph|rpm|secs?)$/i.exec(title.trim());
  if (hump?.[2] && (hump[1] === "" || /^[A-Z]/.test(hump[2])))
    return { name: title.trim(), unitText: hump[2] };
  return { name: title.trim(), unitText: null };
}

/** True when the title names a time column. */
export function isTimeTitle(title: string): boolean {
  return [foldTitle(splitTitle(title).name), foldTitle(title)].some(
    (folded) => TIME.test(folded) || isTimePhrase(folded),
  );
}

type KnownTitle = Partial<
  Pick<TitleReading, "channel" | "axle" | "speedKindOpen" | "needsUnit" | "unknownWord">
>;

/** Wheel speeds: driven or not, or by axle. */
function wheelTitle(has: (meaning: string) => boolean, words: readonly string[]): KnownTitle {
  if (has("undriven")) return { channel: "wheel_speed_undriven" };
  if (has("driven")) return { channel: "wheel_speed_driven" };
  if (has("front") || words.some((word) => FRONT_LETTERS.has(word))) return { axle: "front" };
  if (has("rear") || words.some((word) => REAR_LETTERS.has(word))) return { axle: "rear" };
  return has("speed") ? { channel: "wheel_speed_driven", speedKindOpen: true } : {};
}

const WHEEL_MEANINGS = new Set(["wheel", "speed", "driven", "undriven", "front", "rear", "gps", "vehicle"]);

function knownFrom(folded: string): KnownTitle {
  const letter = LETTER_TITLES[folded];
  if (letter) return letter;
  const { meanings, unknown, other } = meaningOf(folded);
  if (other || meanings.size === 0) return {};
  const has = (meaning: string) => meanings.has(meaning);
  if (has("wheel") || has("undriven") || (has("driven") && has("speed"))) {
    const letters = (word: string) => FRONT_LETTERS.has(word) || REAR_LETTERS.has(word);
    if (!unknown.every(letters) || ![...meanings].every((meaning) => WHEEL_MEANINGS.has(meaning))) return {};
    return wheelTitle(has, folded.split(" "));
  }
  if (has("speed") && [...meanings].every((meaning) => meaning === "speed" || meaning === "vehicle"))
    return unknown.length === 0 ? { channel: "wheel_speed_driven", speedKindOpen: true } : {};
  const found = channelOf(meanings);
  if (found === null) return {};
  return unknown.length === 0 ? found : { channel: found.channel, unknownWord: unknown[0] };
}

/**
 * Reads a column title: channel, unit text, axle. Words are found in ten languages (titles/title-words.ts). A title that is
 * not understood gives channel null, never a guess; one that is understood but for a word carries that word.
 */
export function readTitle(title: string): TitleReading {
  const { name, unitText } = splitTitle(title);
  const whole = foldTitle(title);
  const short = foldTitle(name);
  let known = knownFrom(short);
  const found = ({ channel, axle, unknownWord }: KnownTitle) => (channel || axle) && !unknownWord;
  if (!found(known) && whole !== short) {
    const other = knownFrom(whole);
    if (found(other) || !(known.channel || known.axle)) known = other;
  }
  const { pressureReference, meanings } = meaningOf(short);
  return {
    channel: null,
    axle: null,
    speedKindOpen: false,
    needsUnit: false,
    unknownWord: null,
    choice: choiceOf(short),
    ...known,
    unitText,
    pressureReference,
    boostWord: meanings.has("boost") || meanings.has("turbo"),
  };
}
