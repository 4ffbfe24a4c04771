import { coverageOf } from "@/lib/calibration/coverage/coverage";
import type { AxisLink, CoverageRun } from "@/lib/calibration/coverage/types";
import { change, changeSet, side } from "@/tests/support/change-set-sample";
import type { BenchLine } from "./line";

const POINTS = 16;
const rising = (from: number, step: number) => Array.from({ length: POINTS }, (_, k) => from + step * k);
const cells = (value: number) => Array.from({ length: POINTS ** 2 }, () => value);

/** No two maps share an axis, so that nothing can be placed once for several. */
const CHANGES = changeSet(
  Array.from({ length: 200 }, (_, m) => {
    const axes = [rising(500 + m, 400), rising(20 + m / 100, 15)];
    return change(`map ${m}`, side(cells(1), ...axes), side(cells(2), ...axes));
  }),
);
const LINKS: AxisLink[] = [
  { quantity: "quantity_0", channel: "engine_speed", by: "title" },
  { quantity: "quantity_1", channel: "manifold_pressure", by: "title" },
];
const RUNS = Array.from({ length: 12 }, (_, r): CoverageRun => {
  const timeS = Float64Array.from({ length: 6000 }, (_, i) => i / 100);
  return {
    id: `r${r}`,
    timeS,
    channels: new Map([
      ["engine_speed", { values: timeS.map((t) => 3500 + 2000 * Math.sin(t + r)), unit: "1/min" }],
      ["manifold_pressure", { values: timeS.map((t) => 100 + 80 * Math.sin(1.3 * t)), unit: "kPa" }],
    ]),
  };
});

/** Coverage of a very large change by the runs of a long day. */
export const lines: BenchLine[] = [
  {
    what: "coverage of 200 maps of 16 × 16 by 12 runs of 60 s at 100 Hz",
    ours: () => coverageOf(CHANGES, RUNS, LINKS),
    reference: null,
    notRun: null,
    budget: 1,
  },
];
