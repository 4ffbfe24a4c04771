import type { DataType } from "@/lib/calibration/a2l/types";

/** How physical numbers of the invented control unit are kept, and how its description says so. */
export interface Scale {
  text: string;
  unit: string;
  decimals: number;
  /** Type word and what follows format and unit in COMPU_METHOD. */
  method: { type: string; rest: string };
  toRaw: (physical: number) => number;
}

const linear = (text: string, unit: string, decimals: number, step: number, zero = 0): Scale => ({
  ...{ text, unit, decimals },
  method: { type: "LINEAR", rest: `COEFFS_LINEAR ${step} ${zero}` },
  toRaw: (physical) => (physical - zero) / step,
});
/** raw = factor · physical, written as a rational function. */
const perUnit = (text: string, unit: string, decimals: number, factor: number): Scale => ({
  ...{ text, unit, decimals },
  method: { type: "RAT_FUNC", rest: `COEFFS 0 ${factor} 0 0 0 1` },
  toRaw: (physical) => physical * factor,
});
const plain = (text: string, unit: string, decimals: number): Scale => ({
  ...{ text, unit, decimals },
  method: { type: "IDENTICAL", rest: "" },
  toRaw: (physical) => physical,
});
/** Words stand for raw numbers, which are what values are written in. */
const words = (text: string, table: string): Scale => ({
  ...plain(text, "", 0),
  method: { type: "TAB_VERB", rest: `COMPU_TAB_REF ${table}` },
});

/** Raw counts of the tank's sensor with what they mean; straight lines between. */
const TANK_COUNTS = [
  [20, 0],
  [60, 12],
  [140, 30],
  [220, 50],
] as const;

function tankCount(litres: number): number {
  const next = TANK_COUNTS.findIndex(([, at]) => at >= litres);
  if (next <= 0) return TANK_COUNTS[0][0];
  const [[fromRaw, from], [toRaw, to]] = [TANK_COUNTS[next - 1], TANK_COUNTS[next]];
  return fromRaw + ((litres - from) / (to - from)) * (toRaw - fromRaw);
}

export const SCALES = {
  Speed_rpm: linear("engine speed, a quarter a step", "1/min", 0, 0.25),
  Pressure_kPa: linear("absolute pressure", "kPa", 1, 0.1),
  Difference_kPa: linear("difference of pressures", "kPa", 1, 0.1),
  Share_percent: linear("share in halves of a percent", "%", 1, 0.5),
  Trim_percent: linear("correction, zero in the middle", "%", 2, 0.25, 0),
  Angle_deg: perUnit("crank angle, tenths of a degree", "°", 1, 10),
  Lambda: perUnit("air ratio in thousandths", "", 3, 1000),
  Temperature_C: linear("temperature from −40 on", "°C", 0, 1, -40),
  Hot_C: linear("exhaust gas temperature", "°C", 0, 5),
  Battery_V: linear("battery voltage", "V", 1, 0.1),
  Torque_Nm: linear("torque at the crank", "Nm", 1, 0.1),
  Speed_kmh: plain("road speed", "km/h", 0),
  Number: plain("a number as it is", "", 0),
  Amount_mg: plain("amount of fuel", "mg", 2),
  Inertia_kgm2: plain("moment of inertia", "kg·m²", 3),
  Flow_g_per_s: plain("mass flow", "g/s", 2),
  Time_ms: {
    ...{ text: "time in 1/250 of a millisecond", unit: "ms", decimals: 3 },
    method: { type: "FORM", rest: '/begin FORMULA "X1/250" FORMULA_INV "X1*250" /end FORMULA' },
    toRaw: (physical: number) => physical * 250,
  },
  Ratio: {
    ...{ text: "ratio kept as its thousandfold inverse", unit: "", decimals: 3 },
    method: { type: "RAT_FUNC", rest: "COEFFS 0 0 1000 0 1 0" },
    toRaw: (physical: number) => 1000 / physical,
  },
  Tank_litres: {
    ...{ text: "contents of the tank from the sensor's counts", unit: "l", decimals: 1 },
    method: { type: "TAB_INTP", rest: "COMPU_TAB_REF Tank_table" },
    toRaw: tankCount,
  },
  Control_word: words("kind of control", "Control_table"),
  Switch_word: words("switch", "Switch_table"),
  Stage_word: words("stage of a limiter", "Stage_table"),
} satisfies Record<string, Scale>;
export type ScaleName = keyof typeof SCALES;

/** Tables that the scales name, as the description writes them. */
export const SCALE_TABLES = [
  `/begin COMPU_TAB Tank_table "contents by counts" TAB_INTP ${TANK_COUNTS.length} ${TANK_COUNTS.flat().join(" ")} /end COMPU_TAB`,
  '/begin COMPU_VTAB Control_table "kinds of control" TAB_VERB 3 0 "open loop" 1 "closed loop" 2 "emergency" DEFAULT_VALUE "not used" /end COMPU_VTAB',
  '/begin COMPU_VTAB Switch_table "off and on" TAB_VERB 2 0 "off" 1 "on" /end COMPU_VTAB',
  '/begin COMPU_VTAB_RANGE Stage_table "stages of a limiter" 3 0 3 "soft" 4 11 "firm" 12 255 "hard" /end COMPU_VTAB_RANGE',
];

const RANGES: Partial<Record<DataType, readonly [number, number]>> = {
  UBYTE: [0, 255],
  SBYTE: [-128, 127],
  UWORD: [0, 65_535],
  SWORD: [-32_768, 32_767],
  ULONG: [0, 2 ** 32 - 1],
};

/** The raw number nearest to a physical one. Throws where the data type can't hold it: the definition is then wrong. */
export function rawOf(scale: ScaleName, type: DataType, physical: number): number {
  const raw = SCALES[scale].toRaw(physical);
  if (type === "FLOAT32_IEEE") return raw;
  const range = RANGES[type];
  const whole = Math.round(raw);
  if (!range || whole < range[0] || whole > range[1])
    throw new Error(`${physical} in ${scale} does not fit into ${type}`);
  return whole;
}
