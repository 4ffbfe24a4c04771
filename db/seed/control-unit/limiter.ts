import { type Item, ownAxis } from "@/db/seed/control-unit/item";

const fn = "Limiter";
const coolant = ownAxis(
  "coolant_temperature",
  "Temperature_C",
  "UBYTE",
  [-30, 0, 40, 110, 118, 125],
  [-40, 140],
);

export const LIMITER: readonly Item[] = [
  {
    ...{ name: "Limiter.Speed", text: "Highest engine speed", fn, scale: "Speed_rpm", type: "UWORD" },
    ...{ limits: [4000, 7200], values: [6600] },
  },
  {
    ...{ name: "Limiter.Speed_soft", text: "Speed from which torque is taken back", fn, scale: "Speed_rpm" },
    ...{ type: "UWORD", limits: [3500, 7200], values: [6450] },
    derived: { kind: "dependent", formula: "X1-150", inputs: ["Limiter.Speed"] },
  },
  {
    ...{
      name: "Limiter.Speed_by_gear",
      text: "Highest engine speed in each gear",
      fn,
      scale: "Speed_rpm",
      type: "UWORD",
    },
    ...{ limits: [4000, 7200], dims: [6], values: [6400, 6600, 6600, 6600, 6600, 6500] },
  },
  {
    ...{
      name: "Limiter.Cold_speed",
      text: "Highest engine speed by coolant",
      fn,
      scale: "Speed_rpm",
      type: "UWORD",
    },
    ...{ limits: [2000, 7200], axes: [coolant], values: [4000, 5200, 6600, 6600, 5000, 3500] },
  },
  {
    ...{ name: "Limiter.Road_speed", text: "Highest road speed", fn, scale: "Speed_kmh", type: "UWORD" },
    ...{ limits: [0, 300], values: [230] },
  },
  {
    ...{ name: "Limiter.Stage", text: "How firmly the limiter cuts", fn, scale: "Stage_word", type: "UBYTE" },
    ...{ limits: [0, 255], values: [6] },
  },
  {
    ...{
      name: "Limiter.Pattern",
      text: "Which of twelve injections are left out",
      fn,
      scale: "Number",
      type: "ULONG",
    },
    ...{ limits: [0, 4095], dims: [3], values: [0x249, 0x5b6, 0xfff] },
  },
  {
    ...{ name: "Data_label", text: "Name of the data set", scale: "Number", type: "UBYTE" },
    ...{ limits: [0, 255], characters: { text: "as the car came", bytes: 24 } },
  },
];
