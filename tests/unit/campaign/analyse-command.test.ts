import { spawnSync } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { afterAll, beforeAll, describe, expect, it, vi } from "vitest";

import type { CampaignResult } from "@/lib/measure/types";

vi.setConfig({ testTimeout: 90_000 });

const ROOT = fileURLToPath(new URL("../../..", import.meta.url));
const BROKEN = join(ROOT, "tests/golden/logs/broken");
let folder = "";

const VEHICLE = {
  label: "hatch",
  engine: "spark ignition",
  aspiration: "turbo",
  drive: "FWD",
  mass_kg: 1486,
  tyre: "225/40 R18",
  gear_ratios: [3.62, 2.11, 1.44, 1.09],
  final_drive: 3.75,
  speed_at_rpm: { gear: 3, rpm: 3000, speed_kmh: 64.6 },
  redline_rpm: 6600,
};

function analyse(...args: string[]) {
  const tsx = join(ROOT, "node_modules/tsx/dist/cli.mjs");
  const run = spawnSync(process.execPath, [tsx, join(ROOT, "lib/campaign/analyse.ts"), ...args], {
    cwd: ROOT,
    encoding: "utf8",
    maxBuffer: 1 << 28,
  });
  return { status: run.status, out: run.stdout, err: run.stderr };
}

function write(name: string, content: unknown): string {
  const path = join(folder, name);
  writeFileSync(path, typeof content === "string" ? content : JSON.stringify(content));
  return path;
}

beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), "twinpass-analyse-"));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

/** What each broken log must be refused for: the simulator's note of what was broken in it. */
const EXPECTED: Record<string, string> = {
  b01_empty: "empty_file",
  b02_header_only: "no_data_rows",
  b03_no_time: "no_time_column",
  b04_time_all_equal: "time_not_increasing",
  b05_text_in_numbers: "non_numeric_values",
  b06_two_samples: "too_few_samples",
  b07_binary_junk: "not_text",
  b08_no_speed: "no_speed_channel",
  b09_speed_all_zero: "speed_all_zero",
  b10_nan_flood: "too_many_missing",
};

describe("npm run analyse", () => {
  it("refuses each broken log with its own code and ends with status 1", () => {
    const runs = Object.keys(EXPECTED).map((name, k) => ({
      id: name,
      file: join(BROKEN, `${name}.csv.gz`),
      kind: "pull",
      side: "A",
      leg: "out",
      order: k + 1,
      gear: 3,
    }));
    const { status, out, err } = analyse(write("broken.json", { campaign: 1, vehicle: VEHICLE, runs }));
    const result = JSON.parse(out) as CampaignResult;
    expect(
      Object.fromEntries(result.runs.map((run) => [run.id, run.reasons.map((r) => r.code).join()])),
    ).toEqual(EXPECTED);
    for (const run of result.runs) {
      expect(run.usable).toBe(false);
      expect(run.reasons[0].message).toMatch(/^[A-Z].{20,}[.)]$/s);
    }
    expect(result.sides).toEqual({});
    expect(status).toBe(1);
    expect(err).toContain("b10_nan_flood: too_many_missing");
  });

  it("analyses one gzip-packed run alone with status 0", () => {
    const { status, out } = analyse(
      join(ROOT, "tests/golden/runs/p1-hatch-a-b/campaign-known.json"),
      "--run",
      "r03",
    );
    expect(status).toBe(0);
    const result = JSON.parse(out) as CampaignResult;
    expect(result.runs.map((run) => run.id)).toEqual(["r03"]);
    expect(result.runs[0].usable).toBe(true);
    expect(result.delta).toBeUndefined();
    // Truth of r03 (simulator): 183.4 kW on the day.
    expect(Math.abs((result.runs[0].peak?.engine_kw ?? 0) / 183.386 - 1)).toBeLessThan(0.015);
  });

  it("takes a channel key on the campaign or on a run", () => {
    const csv =
      "Zeit;Rad h\n" +
      Array.from({ length: 50 }, (_, i) => `${(i / 10).toFixed(1).replace(".", ",")};0`).join("\n");
    write("still.csv", csv);
    write("key.json", {
      delimiter: ";",
      decimal: ",",
      time: { column: "Zeit", form: "s" },
      columns: { "Rad h": { channel: "wheel_speed_undriven", unit: "km/h" } },
    });
    const run = { id: "r1", file: "still.csv", kind: "pull", gear: 3 };
    const codes = (content: unknown) =>
      (JSON.parse(analyse(write("keyed.json", content)).out) as CampaignResult).runs[0].reasons.map(
        (r) => r.code,
      );
    expect(codes({ campaign: 1, vehicle: VEHICLE, key: "key.json", runs: [run] })).toEqual([
      "speed_all_zero",
    ]);
    expect(
      codes({
        campaign: 1,
        vehicle: VEHICLE,
        runs: [{ ...run, key: JSON.parse(readFileSync(join(folder, "key.json"), "utf8")) }],
      }),
    ).toEqual(["speed_all_zero"]);
  });

  it("says which field of a campaign file is wrong and ends with status 2", () => {
    const unknown = analyse(
      write("unknown.json", {
        campaign: 1,
        vehicle: { ...VEHICLE, colour: "red" },
        runs: [{ id: "r1", file: "x.csv", kind: "pull" }],
      }),
    );
    expect(unknown.status).toBe(2);
    expect(unknown.err).toMatch(/vehicle: .*colour/);
    const bad = analyse(
      write("bad.json", {
        campaign: 1,
        vehicle: { ...VEHICLE, mass_kg: -3 },
        runs: [
          { id: "r1", file: "x.csv", kind: "pull" },
          { id: "r1", file: "y.csv", kind: "drive" },
        ],
      }),
    );
    expect(bad.status).toBe(2);
    expect(bad.err).toMatch(/vehicle\.mass_kg/);
    expect(bad.err).toMatch(/runs\.1\.kind/);
    expect(analyse(write("no.json", "{")).err).toMatch(/no JSON/);
    expect(analyse(join(folder, "absent.json")).status).toBe(2);
    expect(analyse().status).toBe(2);
    expect(analyse("--what", "x").err).toMatch(/Usage/);
  });
});
