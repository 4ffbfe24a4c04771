import { type Item, placeOfCell, ramp } from "@/db/seed/control-unit/item";
import { ITEMS, MEMORY } from "@/db/seed/control-unit/place";
import { SCALES } from "@/db/seed/control-unit/scales";
import { type Patch, writeImage } from "@/db/seed/control-unit/write-image";
import { hill } from "@/db/seed/demo-effects";

/** A cell's new value from its old one and where it lies on the axes. */
type Rule = (value: number, ...at: number[]) => number;

/** What a revision of the demo's story changes, on top of the image as found. */
interface Change {
  label: string;
  rules: Readonly<Record<string, Rule>>;
  /** Points of an item's own axis that move. */
  axes?: Readonly<Record<string, { axis: number; points: readonly number[] }>>;
  patches?: readonly Patch[];
}

/** More pressure over a range of engine speed, all of it at full pedal. */
const moreBoost =
  (kPa: number, fromRpm: number, toRpm: number): Rule =>
  (value, rpm, pedal) =>
    value + hill(kPa, fromRpm, toRpm)(rpm) * ramp(pedal, 55, 85);
/** Another air ratio over a range of engine speed, where there is boost. */
const moreLambda =
  (lambda: number, fromRpm: number, toRpm: number): Rule =>
  (value, rpm, kPa) =>
    value + hill(lambda, fromRpm, toRpm)(rpm) * ramp(kPa, 120, 160);
/** Later ignition over a range of engine speed, where there is boost. */
const laterIgnition =
  (degrees: number, fromRpm: number, toRpm: number): Rule =>
  (value, rpm, kPa) =>
    value - hill(degrees, fromRpm, toRpm, 200)(rpm) * ramp(kPa, 120, 160);
/** Warmer air is answered from five degrees later on. */
const AIR_POINTS = { axis: 0, points: [0, 20, 35, 45, 55, 75] };

/** What each image of the story changes: what the simulated engine then shows stands in demo-effects. */
export const CHANGES = {
  asFound: { label: "as the car came", rules: {} },
  midRange: {
    label: "mid-range 1",
    rules: {
      "Boost.Target": moreBoost(11, 2300, 4700),
      "Fuel.Lambda_target": moreLambda(0.008, 2300, 4700),
    },
  },
  topEnd: {
    label: "top end 1",
    rules: { "Ignition.Base": laterIgnition(4.5, 5400, 7000) },
  },
  ignition: {
    label: "mid-range 2",
    rules: {
      "Boost.Target": moreBoost(10, 2300, 4600),
      "Ignition.Base": laterIgnition(2, 2300, 4600),
    },
  },
  visitor: {
    label: "full curve 1",
    rules: {
      "Boost.Target": (value, rpm, pedal) =>
        moreBoost(10, 2300, 4600)(value, rpm, pedal) + 4 * ramp(pedal, 55, 85),
      "Ignition.Base": laterIgnition(2, 2300, 4600),
      "Fuel.Lambda_target": (value, _, kPa) => value + 0.005 * ramp(kPa, 120, 160),
      "Boost.Overshoot_most": () => 20,
    },
    axes: { "Ignition.Air_correction": AIR_POINTS },
    // Bytes of the program that the description says nothing about.
    patches: [{ at: MEMORY.code.address + 0x1300, bytes: [0x62, 0x63, 0x63, 0x62] }],
  },
} as const satisfies Record<string, Change>;
export type ImageName = keyof typeof CHANGES;

/** As a workshop would type it. */
const typed = (item: Item, value: number) => Number(value.toFixed(SCALES[item.scale].decimals));

/** An item as a revision leaves it. */
function changed(item: Item, { label, rules, axes }: Change): Item {
  if (item.characters) return { ...item, characters: { ...item.characters, text: label } };
  const rule = rules[item.name];
  const moved = axes?.[item.name];
  return {
    ...item,
    values: rule
      ? item.values?.map((value, cell) => typed(item, rule(value, ...placeOfCell(item.axes ?? [], cell))))
      : item.values,
    axes: moved
      ? item.axes?.map((axis, at) =>
          at === moved.axis && axis.kind === "own" ? { ...axis, points: moved.points } : axis,
        )
      : item.axes,
  };
}

/** Everything that an image of the story holds, in physical numbers. */
export const itemsOf = (name: ImageName): readonly Item[] =>
  ITEMS.map((item) => changed(item, CHANGES[name]));

/** The bytes of an image of the story, from the first address of the control unit on. */
export function imageBytes(name: ImageName): Buffer {
  const { patches = [] }: Change = CHANGES[name];
  return writeImage(itemsOf(name), patches);
}
