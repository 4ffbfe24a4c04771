import type { ReadCharacteristic } from "@/lib/calibration/values/types";

/** A kind of characteristic, singular and plural, in the order in which pages name them. */
export const TYPE_WORDS: Record<ReadCharacteristic["type"], readonly [string, string]> = {
  MAP: ["map", "maps"],
  CURVE: ["curve", "curves"],
  VALUE: ["value", "values"],
  CUBOID: ["cuboid", "cuboids"],
  CUBE_4: ["table of 4 axes", "tables of 4 axes"],
  CUBE_5: ["table of 5 axes", "tables of 5 axes"],
  VAL_BLK: ["block", "blocks"],
  AXIS_PTS: ["shared axis", "shared axes"],
  ASCII: ["text", "texts"],
};
