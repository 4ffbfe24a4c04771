import { describe, expect, it } from "vitest";
import type { LogTable } from "@/lib/logs/types";
import { prepareRun } from "@/lib/measure/run/prepare-run";
import type { CampaignRun, CampaignVehicle, Note } from "@/lib/measure/types";
import { type Scenario, simulateCampaign } from "../../support/generator";
import { braked, changed, frozen, rowsOf, withChannel, without } from "../../support/spoil-log";

/** Full load from about 2.5 to 12 s, coast-down from about 13 s to 70 s and more. */
const { campaign } = simulateCampaign({ order: "A", directions: "+" }, 21);
const [RUN] = campaign.runs;
const { vehicle: VEHICLE } = campaign;

function logOf(changes: Partial<Scenario> = {}): LogTable {
  const log = simulateCampaign({ order: "A", directions: "+", ...changes }, 21).logs.get("r01");
  if (!log) throw new Error("no log");
  return log;
}
const LOG = logOf();

function judged(log: LogTable, run: Partial<CampaignRun> = {}, vehicle: Partial<CampaignVehicle> = {}) {
  const prepared = prepareRun({ ...RUN, ...run }, { ...VEHICLE, ...vehicle }, log);
  return { ...prepared, codes: [...prepared.reasons, ...prepared.notes].map((note) => note.code) };
}

function only(
  log: LogTable,
  code: string,
  run: Partial<CampaignRun> = {},
  vehicle: Partial<CampaignVehicle> = {},
): Note {
  const { notes, reasons } = judged(log, run, vehicle);
  expect(reasons).toEqual([]);
  expect([...new Set(notes.map((note) => note.code))]).toEqual([code]);
  // A capital, a full stop, and what to do: at least two sentences or clauses.
  expect(notes[0].message).toMatch(/^[A-Z].{40,}\.$/s);
  return notes[0];
}

const between = (value: number | undefined, low: number, high: number) => {
  expect(value).toBeGreaterThanOrEqual(low);
  expect(value).toBeLessThanOrEqual(high);
};

/** The spoiled log has the finding and the clean one has none; the faults are the test's own, so their spans are known. */
describe("Findings of one log", () => {
  it("finds nothing in the clean log", () => {
    expect(judged(LOG).codes).toEqual([]);
    expect(judged(LOG).segments?.pull?.to_s).toBeGreaterThan(9);
  });

  describe("sampling", () => {
    it("warns of a low rate, and refuses under 5 rows a second", () => {
      expect(only(logOf({ sensors: { rateHz: 7 } }), "low_rate").consequence).toBe("warned");
      expect(judged(rowsOf(LOG, (i) => i % 17 === 0)).codes).toEqual(["rate_too_low"]);
    });
    it("refuses a log that writes fast but learns the speed once a second", () => {
      const slow = logOf({
        sensors: { undrivenWheel: false, drivenWheel: false, engineSpeed: false, gpsHz: 1 },
      });
      expect(judged(slow).codes).toEqual(["rate_too_low"]);
    });
    it("warns of one slow channel beside fast ones", () =>
      expect(only(logOf({ sensors: { gpsHz: 2 } }), "slow_channel").message).toContain("GPS speed"));
    it("warns of uneven steps, not of half a millisecond", () => {
      expect(only(logOf({ logger: { jitterS: 0.008 } }), "jitter").consequence).toBe("warned");
      expect(judged(logOf({ logger: { jitterS: 0.0005 } })).codes).toEqual([]);
    });
    it("warns of a rate that changes on the way", () => {
      const half = LOG.timeS.length / 2;
      const wheels = without(LOG, "gps_speed");
      const note = only(
        rowsOf(wheels, (i) => i < half || i % 2 === 0),
        "rate_changes",
      );
      between(note.from_s, 20, 80);
    });
    it("masks a gap in the pull and warns of one in the coast-down", () => {
      const gap = (fromS: number, toS: number): LogTable => ({
        ...rowsOf(LOG, (i) => LOG.timeS[i] <= fromS || LOG.timeS[i] >= toS),
        time: { ...LOG.time, gaps: [{ fromS, toS }] },
        problems: [
          { code: "gaps", message: "1 gaps in the samples, the longest 0.40 s; nothing is filled in." },
        ],
      });
      expect(only(gap(6, 6.4), "gap")).toMatchObject({ consequence: "masked", from_s: 6, to_s: 6.4 });
      expect(only(gap(40, 40.4), "gap")).toMatchObject({ consequence: "warned", from_s: 40, to_s: 40.4 });
    });
    it("warns of speeds that repeat their value in the pull", () => {
      const note = only(logOf({ sensors: { rpmStep: 100 } }), "repeated_samples");
      expect(note.message).toContain("engine speed");
      // A slower source that is held row by row is not a coarse one.
      expect(judged(logOf({ logger: { wheelHz: 20, rpmHz: 10 } })).codes).toEqual([]);
    });
    it("passes on what the log reader found, as warnings", () => {
      const problems = [
        { code: "rows_refused", message: "1 rows were refused, the first in line 12: it has 3 of 8 cells." },
      ];
      expect(judged({ ...LOG, problems }).notes).toEqual([{ ...problems[0], consequence: "warned" }]);
    });
  });

  describe("sensors", () => {
    it("leaves out a stretch in which a wheel stands still, carried by the others", () => {
      const { notes, signals } = judged(frozen(LOG, "wheel_speed_undriven", 6, 6.8));
      expect(notes.map((note) => [note.code, note.consequence])).toEqual([["sensor_frozen", "warned"]]);
      between(notes[0].from_s, 6, 6.05);
      between(notes[0].to_s, 6.75, 6.85);
      expect(signals?.undriven?.times.some((t) => t > 6.05 && t < 6.75)).toBe(false);
    });
    it("masks it where nothing else tells the road speed", () => {
      const alone = without(LOG, "wheel_speed_driven", "gps_speed", "latitude", "longitude");
      expect(only(frozen(alone, "wheel_speed_undriven", 6, 6.8), "sensor_frozen").consequence).toBe("masked");
    });
    it("sees a GPS that stays frozen to the end by the wheel that moves", () => {
      const { notes } = judged(frozen(LOG, "gps_speed", 30, 1e9));
      expect(notes[0]).toMatchObject({ code: "sensor_frozen", consequence: "warned" });
      between(notes[0].from_s, 29.9, 30.2);
    });
    it("takes no standing car, no cruise in coarse steps for a frozen sensor", () => {
      const coarse = changed(LOG, "wheel_speed_undriven", (v) => Math.round(v / 0.5) * 0.5);
      expect(judged(coarse).codes).not.toContain("sensor_frozen");
      const standing = changed(LOG, "wheel_speed_undriven", (v, t) => (t > 60 ? 0 : v));
      expect(judged(standing).codes).not.toContain("sensor_frozen");
    });
    it("leaves out dropouts of engine and wheel speed, long and short", () => {
      const rpm = only(
        changed(LOG, "engine_speed", (v, t) => (t > 7 && t < 7.5 ? 0 : v)),
        "sensor_dropout",
      );
      between(rpm.from_s, 7, 7.03);
      between(rpm.to_s, 7.45, 7.5);
      const wheel = only(
        changed(LOG, "wheel_speed_driven", (v, t) => (t > 30 && t < 31 ? 0 : v)),
        "sensor_dropout",
      );
      expect(wheel.message).toContain("driven wheel speed");
      const twice = judged(
        changed(LOG, "engine_speed", (v, t, i) => (i % 50 === 0 && t > 4 && t < 11 ? 0 : v)),
      );
      expect(twice.notes).toHaveLength(1);
      expect(twice.notes[0].message).toMatch(/in \d+ places/);
    });
    it("tells a single reading error that it leaves out", () => {
      const note = only(
        changed(LOG, "wheel_speed_undriven", (v, _t, i) => (i === 300 ? v + 9 : v)),
        "reading_errors",
      );
      between(note.from_s, 5.99, 6.01);
    });
    it("leaves out an altitude that jumps and an accelerometer that is turned round or reads in g", () => {
      const jump = judged(changed(LOG, "altitude", (v, t) => (t > 20 ? v + 40 : v)));
      expect(jump.notes.map((n) => [n.code, n.consequence])).toEqual([["altitude_jump", "masked"]]);
      expect(jump.notes[0].message).toMatch(/at 20\.[01] s/);
      expect(jump.signals?.altitude).toBeNull();
      const turned = judged(changed(LOG, "longitudinal_acceleration", (v) => -v));
      expect(turned.notes[0]).toMatchObject({ code: "accelerometer_disagrees", consequence: "masked" });
      expect(turned.notes[0].message).toContain("the other way");
      expect(turned.signals?.acceleration).toBeNull();
      const inG = judged(changed(LOG, "longitudinal_acceleration", (v) => v / 9.80665));
      expect(inG.notes[0].message).toContain("reads in g");
    });
  });

  describe("driving", () => {
    it("masks a short lift inside the pull and half a second after it", () => {
      const note = only(
        changed(LOG, "pedal", (v, t) => (t > 6 && t < 6.1 ? 40 : v)),
        "lift",
      );
      expect(note.consequence).toBe("masked");
      between(note.from_s, 5.85, 6);
      between(note.to_s, 6.5, 6.65);
      expect(note.message).toContain("40 %");
    });
    it("uses the longer part of a pull with a long lift, and says so", () => {
      const { notes, segments } = judged(changed(LOG, "pedal", (v, t) => (t > 4 && t < 4.6 ? 20 : v)));
      expect(notes.map((note) => note.code)).toEqual(["lift"]);
      between(segments?.pull?.from_s, 4.55, 4.65);
    });
    it("says that full load is taken on trust without pedal and throttle", () =>
      expect(only(without(LOG, "pedal"), "load_not_logged").consequence).toBe("warned"));
    it("masks a change of gear under full load", () => {
      const shifted = withChannel(LOG, "gear", "1", (t) => (t < 4 ? 2 : 3));
      const { notes, segments } = judged(shifted);
      expect(notes.map((note) => [note.code, note.consequence])).toEqual([["gear_change", "masked"]]);
      expect(segments?.pull?.from_s).toBeGreaterThan(4);
      between(notes[0].from_s, 3.4, 4);
      between(notes[0].to_s, 4, 4.6);
    });
    it("refuses a pull over less than 40 % of the way to the red line, and one of under 30 samples", () => {
      const short = judged(changed(LOG, "pedal", (v, t) => (t > 4.5 && t < 20 ? 20 : v)));
      expect(short.reasons.map((r) => r.code)).toEqual(["pull_too_short"]);
      const few = logOf({ sensors: { rateHz: 5, gpsHz: 5 }, gear: 2 });
      expect(judged(few, { gear: 2 }).reasons.map((r) => r.code)).toEqual(["pull_too_short"]);
    });
    it("cuts the braked part out of the coast-down", () => {
      const { notes, segments } = judged(braked(without(LOG, "latitude", "longitude"), 40, 42, 0.8));
      expect(notes.map((note) => [note.code, note.consequence])).toEqual([["braked_coast", "masked"]]);
      between(notes[0].from_s, 38.5, 40);
      between(notes[0].to_s, 42, 43.5);
      const cut = segments?.coasts ?? [];
      expect(cut.some((c) => c.from_s < 41.9 && c.to_s > 40.1)).toBe(false);
      expect(cut.length).toBeGreaterThanOrEqual(2);
    });
    it("refuses a coast-down run without one", () => {
      const held = changed(LOG, "pedal", (_, t) => (t < 2 ? 5 : 60));
      expect(judged(held, { kind: "coast-down" }).codes).toContain("no_coast_found");
    });
    it("warns of a cold engine", () => {
      const cold = withChannel(LOG, "coolant_temperature", "°C", () => 45);
      expect(only(cold, "engine_cold").message).toContain("45 °C");
      expect(judged(withChannel(LOG, "coolant_temperature", "°C", () => 88)).codes).toEqual([]);
    });
  });
});
