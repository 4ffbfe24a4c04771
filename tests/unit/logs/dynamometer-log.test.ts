import { expect, test } from "vitest";
import { readLog } from "@/lib/logs/read-log";
import { codesOf, columnOf, goldenLog } from "@/tests/support/golden-log";

const MPH_MPS = 0.44704;

// A recording of a chassis dynamometer that nobody here wrote; figures by another program (Python's csv module) from its text.
test("a recording of another laboratory: units in brackets, a first time of -0.0, accelerations by linear interpolation", () => {
  const table = readLog(goldenLog("dynamometer/61811014.txt"));
  expect(table).toMatchObject({ rowsRead: 1320, rowsRefused: [], delimiter: ",", decimal: "." });
  expect(table.time).toMatchObject({ column: "Time[s]", form: "s", rateHz: 1, gaps: [] });
  const speed = columnOf(table, "Dyno_Spd[mph]");
  expect(speed).toMatchObject({ channel: "wheel_speed_driven", unitFound: "mph" });
  expect(codesOf(table)).toEqual(["speed_kind_assumed"]);
  expect(Math.max(...speed.values)).toBeCloseTo(80.462 * MPH_MPS, 9);
  const found: number[] = [];
  let beganS: number | null = null;
  table.timeS.forEach((t, i) => {
    if (i === 0) return;
    const [before, now] = [speed.values[i - 1] / MPH_MPS, speed.values[i] / MPH_MPS];
    const at = (mph: number) =>
      table.timeS[i - 1] + ((mph - before) / (now - before)) * (t - table.timeS[i - 1]);
    if (before < 10 && now >= 10) beganS = at(10);
    if (now < 10) beganS = null;
    if (before < 50 && now >= 50 && beganS !== null) {
      found.push(at(50) - beganS);
      beganS = null;
    }
  });
  const expected = [11.328, 10.444, 8.879, 11.717, 10.24, 8.882];
  expect(found).toHaveLength(expected.length);
  found.forEach((s, k) => {
    expect(s).toBeCloseTo(expected[k], 3);
  });
});
