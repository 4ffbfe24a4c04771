import { describe, expect, it } from "vitest";
import type { LogTable } from "@/lib/logs/types";
import { standardAtmosphere } from "@/lib/measure/air/air-density";
import { resistanceNotes, torqueNotes } from "@/lib/measure/judge/plausible";
import { prepareRun } from "@/lib/measure/run/prepare-run";
import type { CampaignRun, CampaignVehicle } from "@/lib/measure/types";
import { expectClose } from "../../support/expect-close";
import { simulateCampaign } from "../../support/generator";
import { changed, withChannel, without } from "../../support/spoil-log";

const { campaign, logs } = simulateCampaign({ order: "A", directions: "+" }, 22);
const [RUN] = campaign.runs;
const VEHICLE = campaign.vehicle;
const LOG: LogTable = logs.get("r01") ?? without({} as LogTable);

function findings(log: LogTable, run: Partial<CampaignRun> = {}, vehicle: Partial<CampaignVehicle> = {}) {
  const { notes, reasons } = prepareRun({ ...RUN, ...run }, { ...VEHICLE, ...vehicle }, log);
  return [...reasons, ...notes];
}
const codes = (...args: Parameters<typeof findings>) => findings(...args).map((note) => note.code);

describe("Speeds against each other", () => {
  it("refuses a wheel speed in miles read as kilometres, and names the units", () => {
    const [miles] = findings(
      changed(
        changed(LOG, "wheel_speed_undriven", (v) => v / 1.609344),
        "wheel_speed_driven",
        (v) => v / 1.609344,
      ),
    );
    expect(miles.code).toBe("speed_units_disagree");
    expect(miles.message).toContain("miles an hour");
    const [knots] = findings(changed(LOG, "gps_speed", (v) => v / 1.852));
    expect(knots.message).toContain("knots");
  });
  it("refuses a speed that no car reaches", () => {
    const alone = without(LOG, "gps_speed", "wheel_speed_driven", "latitude", "longitude");
    expect(codes(changed(alone, "wheel_speed_undriven", (v) => 3.6 * v))).toEqual(["speed_implausible"]);
  });
  it("warns of a wheel scale beyond 4 %, not of 3 %", () => {
    const scaled = (factor: number) => codes(changed(LOG, "wheel_speed_undriven", (v) => factor * v));
    expect(scaled(1.055)).toEqual(["wheel_scale"]);
    expect(scaled(0.945)).toEqual(["wheel_scale"]);
    expect(scaled(1.03)).toEqual([]);
  });
  it("warns of a scale that changes within the run", () =>
    expect(codes(changed(LOG, "wheel_speed_undriven", (v, t) => (t > 35 ? 1.025 * v : v)))).toEqual([
      "wheel_scale_changes",
    ]));
  it("warns of a GPS that lies 0.9 s behind, and of one whose offset can't be told", () => {
    const rows = Math.round(0.75 * 50);
    const values = LOG.channels.find((c) => c.channel === "gps_speed")?.values ?? new Float64Array();
    const [late] = findings(changed(LOG, "gps_speed", (_v, _t, i) => values[Math.max(0, i - rows)]));
    expect(late.code).toBe("gps_offset");
    expect(late.message).toMatch(/0\.(8[5-9]|9[0-5]) s behind/);
    const lost = changed(LOG, "gps_speed", (_v, _t, i) => values[Math.max(0, i - 150)]);
    expect(findings(lost).find((n) => n.code === "gps_offset")?.message).toContain("could not be settled");
  });
  it("warns where way by position and way by speed and time part", () => {
    const fast = { ...LOG, timeS: LOG.timeS.map((t) => 1.06 * t) };
    expect(codes(fast)).toContain("clock_disagrees");
    const note = findings(fast).find((n) => n.code === "clock_disagrees");
    expect(note?.message).toContain("clock");
  });
});

describe("Gear, gearing and sheet", () => {
  it("warns where the gear channel says another gear than typed", () => {
    const third = withChannel(LOG, "gear", "1", (t) => (t < 12 ? 3 : 0));
    expect(codes(third)).toEqual([]);
    const [note] = findings(third, { gear: 4 });
    expect(note.code).toBe("gear_channel_disagrees");
    expect(note.message).toMatch(/says 3 .*typed is 4/);
  });
  it("warns where nothing checks the typed gear", () =>
    expect(codes(without(LOG, "engine_speed"))).toEqual(["gear_not_checked"]));
  it("warns of engine speeds above the typed red line, not of an overshoot", () => {
    expect(codes(LOG, {}, { redline_rpm: VEHICLE.redline_rpm - 500 })).toEqual(["above_red_line"]);
    expect(codes(LOG, {}, { redline_rpm: VEHICLE.redline_rpm - 100 })).toEqual([]);
  });
  it("warns of a sheet that contradicts itself", () => {
    // 205/55 R16 by the marking: 3.05 × (2 × 0.205 × 0.55 + 16 × 0.0254) = 1.927 m.
    const [note] = findings(LOG, {}, { tyre: "205/55 R16", rolling_circumference_m: 2.1 });
    expect(note.code).toBe("sheet_disagrees");
    expect(note.message).toMatch(/2\.100 m .*1\.927 m \(\+9\.0 %\)/);
    expect(codes(LOG, {}, { tyre: "205/55 R16", rolling_circumference_m: 1.95 })).toEqual([]);
  });
});

describe("Typed weather", () => {
  it("knows the standard pressure of a height (ISO 2533 table, from memory: 898.76 hPa at 1,000 m, 954.61 at 500 m)", () => {
    expectClose(standardAtmosphere(1000).pressurePa / 100, 898.76, { abs: 0.1 });
    expectClose(standardAtmosphere(500).pressurePa / 100, 954.61, { abs: 0.1 });
  });
  it("warns where none is typed", () => expect(codes(LOG, { weather: null })).toEqual(["weather_missing"]));
  it("warns of a sea-level pressure typed at 800 m", () => {
    const high = changed(LOG, "altitude", (h) => h + 680);
    const weather = { temp_c: 15, pressure_hpa: 1013, rh_pct: 50 };
    const [note] = findings(high, { weather });
    expect(note.code).toBe("pressure_implausible");
    expect(note.message).toMatch(/1013 hPa.*reduced to sea level/);
    expect(codes(high, { weather: { ...weather, pressure_hpa: 925 } })).toEqual([]);
  });
  it("warns of air warmer than the intake's", () => {
    const intake = withChannel(LOG, "intake_temperature", "°C", () => 12);
    expect(codes(intake, { weather: { temp_c: 25, pressure_hpa: 1000, rh_pct: 50 } })).toEqual([
      "temperature_implausible",
    ]);
    expect(codes(intake, { weather: { temp_c: 8, pressure_hpa: 1000, rh_pct: 50 } })).toEqual([]);
  });
});

describe("Typed mass: implausible only beyond stated limits", () => {
  it("warns of a drag area or rolling resistance of no road car", () => {
    expect(resistanceNotes({ f0N: 170, f2NPerMps2: 0.4 }, 1486)).toEqual([]);
    // Drag area 2 × 1.3 / 1.2 = 2.17 m².
    expect(resistanceNotes({ f0N: 400, f2NPerMps2: 1.3 }, 4400)[0].message).toContain("2.17 m²");
    // 30 N over 1,486 kg × 9.80665 m/s²: 0.2 %.
    expect(resistanceNotes({ f0N: 30, f2NPerMps2: 0.4 }, 1486)[0].message).toContain("0.2 % of the weight");
  });
  it("warns of a torque that the displacement can't give", () => {
    const natural = { ...VEHICLE, aspiration: "natural" as const, displacement_l: 2 };
    expect(torqueNotes(210, natural, 1400)).toEqual([]);
    expect(torqueNotes(400, natural, 2700)[0].message).toContain("200 N·m a litre");
    expect(torqueNotes(400, { ...VEHICLE, aspiration: "turbo", displacement_l: 2 }, 1400)).toEqual([]);
    expect(torqueNotes(400, { ...natural, displacement_l: null }, 1400)).toEqual([]);
  });
});
