import Papa from "papaparse";
import { type PlottedGrid, plottedGrid } from "@/lib/compare/plotted-grid";
import { ConflictError } from "@/lib/errors";
import { getComparison } from "@/lib/services/comparisons/load";
import { sideLabels, sideOfRun } from "@/lib/services/comparisons/schema";
import { type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";

/** Texts that a spreadsheet would take for a formula get an apostrophe in front (OWASP ASVS 5.0, 1.2.10); numbers stay. */
const FORMULA_START = /^[=+\-@\t\r\n\0]/;

/**
 * The plotted grid as CSV (RFC 4180): units in the header, decimal point always, a gap is an empty cell.
 * @param labels how the sides are called, e.g. "R14"
 */
export function gridCsv(grid: PlottedGrid, labels: { a: string; b: string }): string {
  const { a, b } = grid;
  const basis = grid.basis === "reference" ? "reference air" : "air of the day";
  const columns: [string, readonly (number | null)[]][] = [
    ["engine speed [1/min]", grid.rpm],
    [`power A ${labels.a}, ${basis} [kW]`, a.kw],
    [`power B ${labels.b}, ${basis} [kW]`, b.kw],
    [`torque A ${labels.a}, ${basis} [N.m]`, a.nm],
    [`torque B ${labels.b}, ${basis} [N.m]`, b.nm],
    ["B minus A [%]", grid.pct.delta],
    ["band low [%]", grid.pct.low],
    ["band high [%]", grid.pct.high],
    ["power B minus A [kW]", grid.kw.delta],
    ["power band low [kW]", grid.kw.low],
    ["power band high [kW]", grid.kw.high],
    ["torque B minus A [N.m]", grid.nm.delta],
    ["torque band low [N.m]", grid.nm.low],
    ["torque band high [N.m]", grid.nm.high],
  ];
  const rows = grid.rpm.map((_, index) => columns.map(([, values]) => values[index] ?? null));
  return `${Papa.unparse(
    { fields: columns.map(([title]) => title), data: rows },
    { escapeFormulae: FORMULA_START },
  )}\r\n`;
}

/**
 * A comparison's grid for download, noted in the ledger.
 * @throws ForbiddenError, NotFoundError, ConflictError while there is no result for what counts now
 */
export async function exportComparison(
  ctx: Ctx,
  comparisonId: string,
): Promise<{ fileName: string; csv: string }> {
  const view = await getComparison(ctx, comparisonId, "comparison.export");
  const grid = view.result && plottedGrid(view.result, sideOfRun(view.runs));
  if (view.state !== "ready" || !grid)
    throw new ConflictError(
      "no_result",
      "There is no result for what counts now. Open the comparison, recompute it and save it then.",
    );
  const labels = sideLabels(view);
  await withTransaction(ctx, (tx, inner) =>
    appendLedger(tx, inner, {
      event: "compare.exported",
      subjectType: "comparison",
      subjectId: view.id,
      programmeId: view.programme.id,
      data: { inputSha256: view.inputSha256 },
    }),
  );
  // The prime of a null test has no place in a header of HTTP.
  const names = view.nullTestRoadDayId === null ? `${labels.a}-${labels.b}` : `${labels.a}-null-test`;
  return {
    fileName: `${names}-${view.inputSha256.slice(0, 8)}.csv`,
    csv: gridCsv(grid, labels),
  };
}
