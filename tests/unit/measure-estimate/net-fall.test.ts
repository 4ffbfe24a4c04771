import { describe, expect, it } from "vitest";
import { analyseCampaign } from "@/lib/measure/analyse-campaign";
import { simulateCampaign } from "../../support/generator";

describe("net fall of pulls on a simulated strip whose height is known", () => {
  it.each([
    ["positions and altitude logged", true, "road day"],
    ["no positions, only coast-downs and an accelerometer", false, "road day"],
  ])("%s: within ± of the truth in nearly every run", { timeout: 60_000 }, (_name, position, from) => {
    const simulated = simulateCampaign({ sensors: { position }, order: "ABBA", directions: "+-+-" }, 41);
    const { runs } = analyseCampaign(simulated.campaign, simulated.logs);
    let inside = 0;
    runs.forEach((run, k) => {
      expect(run.net_fall_from).toBe(from);
      const log = simulated.logs.get(run.id);
      const wheel = log?.channels.find((channel) => channel.channel === "wheel_speed_undriven")?.values;
      const pull = run.segments?.pull;
      if (!log || !wheel || !pull) throw new Error("the simulated run has a pull and a wheel speed");
      const direction = simulated.campaign.runs[k].leg === "out" ? 1 : -1;
      const wayTo = (t: number) =>
        log.timeS.reduce(
          (sum, at, i) => (i > 0 && at <= t ? sum + wheel[i] * (at - log.timeS[i - 1]) : sum),
          0,
        );
      const [start, end] = [pull.from_s, pull.to_s].map(wayTo);
      const heightAt = (way: number) => simulated.heightM(simulated.starts[k] + direction * way);
      const truthPct = (100 * (heightAt(start) - heightAt(end))) / (end - start);
      const miss = Math.abs((run.net_fall_pct ?? 99) - truthPct);
      if (miss <= 2 * (run.net_fall_uncertainty_pct ?? 0)) inside++;
      expect(miss, `run ${run.id}: ${run.net_fall_pct} against ${truthPct}`).toBeLessThan(0.25);
    });
    expect(inside).toBeGreaterThanOrEqual(3);
  });
});
