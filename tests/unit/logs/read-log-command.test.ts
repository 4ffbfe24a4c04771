import { spawnSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { goldenLog } from "@/tests/support/golden-log";

const home = fileURLToPath(new URL("../../../", import.meta.url));
let folder = "";
const run = (...args: string[]) =>
  spawnSync(process.execPath, ["--import", "tsx", "lib/campaign/read-log.ts", ...args], {
    cwd: home,
    encoding: "utf8",
  });

beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), "read-log-"));
  const rows = Array.from({ length: 20 }, (_, i) => `${i / 10};${10 + i},5`.replace(".", ","));
  writeFileSync(join(folder, "run.csv"), ["Zeit;Rad h", ...rows].join("\n"));
  writeFileSync(join(folder, "empty.csv"), "");
  writeFileSync(
    join(folder, "key.json"),
    JSON.stringify({
      time: { column: "Zeit", form: "s" },
      columns: { "Rad h": { channel: "wheel_speed_undriven", unit: "km/h" } },
    }),
  );
});
afterAll(() => rmSync(folder, { recursive: true }));

describe("read-log", { timeout: 30_000 }, () => {
  it("prints what was understood with the key, status 0", () => {
    const got = run(join(folder, "run.csv"), "--key", join(folder, "key.json"));
    expect(got.stderr).toBe("");
    expect(got.status).toBe(0);
    const report = JSON.parse(got.stdout);
    expect(report).toMatchObject({
      delimiter: ";",
      decimal: ",",
      rows_read: 20,
      time: { column: "Zeit", form: "s", rate_hz: 10 },
    });
    expect(report.channels[0]).toMatchObject({
      channel: "wheel_speed_undriven",
      unit_found: "km/h",
      unit: "m/s",
    });
    expect(report.channels[0].max).toBeCloseTo(29.5 / 3.6, 9);
  });
  it("a file that can't be read: status 1 and a plain sentence", () => {
    const got = run(join(folder, "empty.csv"));
    expect([got.status, got.stdout]).toEqual([1, ""]);
    expect(got.stderr).toMatch(/^empty_file: The file is empty\./);
  });
  it("a binary measurement: no encoding, no delimiter, its format named", () => {
    writeFileSync(join(folder, "run.mf4"), goldenLog("mdf/made_dz1_transposed.mf4"));
    const got = run(join(folder, "run.mf4"));
    expect(got.status).toBe(0);
    expect(JSON.parse(got.stdout)).toMatchObject({
      format: "mdf4",
      encoding: null,
      delimiter: null,
      decimal: null,
      rows_read: 2000,
      left_out: ["state_text"],
    });
  });
  it("a wrong call or a missing file: status 2", () => {
    expect(run().status).toBe(2);
    expect(run(join(folder, "nowhere.csv")).status).toBe(2);
  });
});
