/** Anchors of the methods page and their short names, in order. Reports and notes link to them. */
export const METHOD_CONTENTS = [
  ["speed", "Road speed"],
  ["smoothing", "Smoothing"],
  ["segments", "Pull and coast-down"],
  ["resistance", "What resists"],
  ["power", "Power and torque"],
  ["gearing", "Engine and road speed"],
  ["sprints", "Times and distances"],
  ["judging", "Judging each run"],
  ["air", "Air"],
  ["factors", "Weather factors"],
  ["uncertainty", "Absolute uncertainty"],
  ["difference", "Difference and band"],
  ["twins", "Twins and closure"],
  ["planning", "How many runs"],
  ["gates", "When a gate is met"],
  ["fingerprints", "Fingerprints"],
] as const;
