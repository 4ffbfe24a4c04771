import type { Coverage } from "@/lib/calibration/coverage/types";
import { nameSome } from "@/lib/format/name-some";
import { knownChanges } from "@/lib/gates/calibration/known-changes";
import type { GateEvidence } from "@/lib/gates/evidence";
import type { CoverageGate, GateResult } from "@/lib/gates/plan";
import {
  counted,
  doesNotApply,
  figure,
  gateResult,
  met,
  notMet,
  tooLittle,
  type Verdict,
} from "@/lib/gates/verdict";

/**
 * Usable runs of any kind visited at least x % of all cells that changed against what stands. Tables whose coverage can't be told
 * count as not visited; not met only when x % can't be reached even if all of theirs had been. What has no axes is left out.
 */
export function coverageGate(gate: CoverageGate, evidence: GateEvidence): GateResult {
  const title = `At least ${figure(gate.atLeastPct)} % of the changed cells visited by usable runs`;
  return gateResult(gate, title, verdictOn(gate.atLeastPct, evidence));
}

function verdictOn(atLeastPct: number, evidence: GateEvidence): Verdict {
  const known = knownChanges(evidence, "standing");
  if ("open" in known) return known.open;
  const { changes, calibration } = known;
  if (changes.characteristics.length === 0)
    return changes.identical
      ? doesNotApply("The image holds the same bytes as what stands.")
      : tooLittle(
          "No described table changed, only bytes that nobody described; their coverage can't be told.",
          "Add the description (A2L) to the revision.",
        );
  if (calibration.coverageState === "no_runs")
    return tooLittle("There is no usable run of this revision yet.", "Drive it where the changed cells lie.");
  if (!calibration.coverage)
    return tooLittle(
      "Where the runs of now went is not worked out yet.",
      "Open the revision's page: it is on its way there, or can be asked for.",
    );
  return verdictOnShare(atLeastPct, calibration.coverage);
}

function verdictOnShare(atLeastPct: number, coverage: Coverage): Verdict {
  const { changedCells, changedVisited, maps, notTold } = coverage;
  const without = notTold.filter(({ code }) => code === "no_axes");
  const apart =
    without.length > 0 ? ` Without axes, so left out: ${nameSome(without.map(({ name }) => name))}.` : "";
  if (changedCells === 0) return doesNotApply(`No cell of a table with axes changed.${apart}`);
  const untold = notTold.filter(({ code, changedCells: cells }) => code !== "no_axes" && cells > 0);
  const untoldCells = untold.reduce((sum, { changedCells: cells }) => sum + cells, 0);
  const share = (cells: number) => (100 * cells) / changedCells;
  const unknown =
    untold.length > 0
      ? ` ${counted(untoldCells, "cell")} can't be told and count${untoldCells === 1 ? "s" : ""} as not visited: ${untold[0].reason}${untold.length > 1 ? ` So it is with ${nameSome(untold.slice(1).map(({ name }) => name))}.` : ""}`
      : "";
  const fewest = maps.reduce<(typeof maps)[number] | null>(
    (worst, map) => (map.changedNeverVisited.length > (worst?.changedNeverVisited.length ?? 0) ? map : worst),
    null,
  );
  const missing = fewest
    ? ` Most are missing in ${fewest.name}: ${fewest.changedNeverVisited.length} of ${fewest.changedCells}.`
    : "";
  const why = `${counted(coverage.runs.length, "usable run")} visited ${changedVisited} of ${counted(changedCells, "changed cell")} (${figure(share(changedVisited))} %); ${figure(atLeastPct)} % are asked for.${missing}${unknown}${apart}`;
  const reached = (cells: number) => 100 * cells >= atLeastPct * changedCells;
  if (reached(changedVisited)) return met(why);
  return reached(changedVisited + untoldCells)
    ? tooLittle(why, "Link the axes to channels of the log, and record these channels.")
    : notMet(why, "Drive where the changed cells lie that no run visited.");
}
