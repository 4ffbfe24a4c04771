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

const EXCLUDED =
  /\b(target|desired|soll|setpoint|set ?point|request(ed)?|commanded|cmd|demand|error|status|valid|flag|accuracy|heading|sats|ratio|limit|raw|steering|lenkrad|brake|brems\w*|clutch|kupplung\w*)\b/;
const FRONT = /\b(front|vorne?|va|f|fl|fr|vl|vr|v)\b/;
const REAR = /\b(rear|hinten|ha|r|rl|rr|hl|hr|h|back)\b/;

const RULES: readonly [KnownChannel, RegExp][] = [
  [
    "gps_speed",
    /\b(gps|gnss)\b.*\b(speed|geschwindigkeit|velocity|vel)\b|\b(speed|velocity) (gps|gnss|over ground)\b|^sog$/,
  ],
  [
    "engine_speed",
    /\b(engine|eng|motor|crank)\b.*\b(speed|rpm|drehzahl|revs?)\b|^rpm$|^motordrehzahl$|^drehzahl$|^n ?(mot(or)?|eng(ine)?)$|^n$|^revs$|^engine speed$/,
  ],
  [
    "pedal",
    /\b(accelerator|accel|gas|throttle|fahr)? ?pedal\b|^(fahr|gas)pedal\w*|^app$|\baccelerator (position|pos)\b/,
  ],
  ["throttle", /\bthrottle\b|^drosselklappe\w*|^tps$/],
  [
    "manifold_pressure",
    /\bmanifold\b.*\bpress(ure)?\b|^map( sensor)?$|\bsaugrohrdruck\b|\bladedruck\b|\bboost( press(ure)?)?$|\bcharge (air )?press(ure)?\b|\bmanifold abs(olute)?\b|\bintake (manifold )?press(ure)?\b/,
  ],
  ["lambda", /^lambda( \d| value| act(ual)?| ist| bank ?\d| sensor)?$|^wideband lambda$/],
  [
    "ignition_advance",
    /\bignition( (advance|timing|angle|adv))?$|\bign (adv|advance|timing|angle)\b|\b(spark|timing) adv(ance)?\b|\bz(ue|u)ndwinkel\b/,
  ],
  ["knock_retard", /\bknock( (retard|correction|retardation))?$|\bklopfregelung\b|\bknock ret\b/],
  [
    "intake_temperature",
    /\b(intake|inlet|charge)( air)? temp(erature)?\b|^iat$|\bansaugluft ?temp(eratur)?\b|\bladeluft ?temp(eratur)?\b/,
  ],
  [
    "coolant_temperature",
    /\b(coolant|engine coolant|water)( temp(erature)?)?$|^ect$|^clt$|\bk(ue|u)hlmittel ?(temp(eratur)?)?\b|\bk(ue|u)hlwasser ?temp\w*\b/,
  ],
  ["exhaust_temperature", /\bexhaust( gas)? temp(erature)?\b|^egt( ?\d)?$|\babgas ?temp(eratur)?\b/],
  ["gear", /^(current |selected |actual )?gear( position| number| no)?$|^gang$/],
  [
    "longitudinal_acceleration",
    /\blong(itudinal)?\b.*\b(acc|accel|acceleration|g)\b|\b(acc|accel|acceleration) long(itudinal)?\b|\bl(ae|a)ngsbeschleunigung\b/,
  ],
  ["latitude", /^(gps |gnss )?lat(itude)?$|^(geographische )?breite(ngrad)?$/],
  ["longitude", /^(gps |gnss )?(lon|long|lng|longitude)$|^(geographische )?l(ae|a)nge(ngrad)?$/],
  ["altitude", /^(gps |gnss )?(alt|altitude|elevation|height)$|^(gps )?h(oe|o)he$/],
];
const WHEEL =
  /\bwheel\b|\bwhl\b|\brad\b|\bradgeschwindigkeit\b|\braddrehzahl\b|\bundriven\b|\bnon driven\b|\bdriven\b|\bangetrieben\b/;
const VEHICLE_SPEED =
  /^(vehicle|veh|car|road|dyno|cyc|ground|obd|ecu)? ?(speed|spd|velocity|mps|kmh|mph|geschwindigkeit)( (obd|ecu|can))?$|^v$|^fahrgeschwindigkeit$|^vss$|^v ?veh(icle)?$/;
const TIME =
  /^((device|gps|utc|local|log|elapsed|relative|session) )?(time|zeit)\b|^(elapsed|timestamp|time stamp|date ?time|uhrzeit|clock|zeitstempel|cyc secs?|cycle secs?|secs?|seconds)\b|^t$/;

function fold(title: string): string {
  return title
    .normalize("NFKC")
    .replace(/([a-z])([A-Z])/g, "$1 $2")
    .toLowerCase()
    .replaceAll("ä", "ae")
    .replaceAll("ö", "oe")
    .replaceAll("ü", "ue")
    .replaceAll("ß", "ss")
    .replaceAll("λ", "lambda")
    .replace(/[^a-z0-9]+/g, " ")
    .trim();
}

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
  return TIME.test(fold(splitTitle(title).name)) || TIME.test(fold(title));
}

function knownFrom(folded: string): Pick<TitleReading, "channel" | "axle" | "speedKindOpen"> {
  const none = { channel: null, axle: null, speedKindOpen: false } as const;
  if (EXCLUDED.test(folded) && !/\bpedal\b/.test(folded)) return none;
  if (/\b(brake|clutch|brems\w*|kupplung\w*)\b/.test(folded)) return none;
  if (WHEEL.test(folded)) {
    if (/\b(undriven|non driven|nicht angetrieben|free rolling)\b/.test(folded))
      return { ...none, channel: "wheel_speed_undriven" };
    if (/\b(driven|angetrieben|drive)\b/.test(folded)) return { ...none, channel: "wheel_speed_driven" };
    if (FRONT.test(folded)) return { ...none, axle: "front" };
    if (REAR.test(folded)) return { ...none, axle: "rear" };
    return /\b(speed|geschwindigkeit|spd)\b|radgeschwindigkeit/.test(folded)
      ? { ...none, channel: "wheel_speed_driven", speedKindOpen: true }
      : none;
  }
  for (const [channel, rule] of RULES) if (rule.test(folded)) return { ...none, channel };
  if (VEHICLE_SPEED.test(folded)) return { ...none, channel: "wheel_speed_driven", speedKindOpen: true };
  return none;
}

/** Reads a column title: channel, unit text, axle. A title that is not understood gives channel null, never a guess. */
export function readTitle(title: string): TitleReading {
  const { name, unitText } = splitTitle(title);
  const whole = fold(title);
  const short = fold(name);
  let known = knownFrom(short);
  if (known.channel === null && known.axle === null && whole !== short) known = knownFrom(whole);
  const pressureReference = /\b(gauge|rel|relativ|ueberdruck)\b/.test(short)
    ? "gauge"
    : /\b(abs|absolut|absolute|map)\b/.test(short)
      ? "absolute"
      : null;
  return { ...known, unitText, pressureReference, boostWord: /\b(boost|ladedruck|charge)\b/.test(short) };
}
