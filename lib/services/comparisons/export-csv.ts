import { type PlottedGrid, plottedGrid } from "@/lib/compare/plotted-grid";
import { ConflictError } from "@/lib/errors";
import { csvText } from "@/lib/format/csv-text";
import { ENGINE_CHANNELS, ENGINE_UNITS } from "@/lib/measure/engine/full-load-types";
import { valuesOn } from "@/lib/measure/engine/values-on";
import type { CampaignResult } from "@/lib/measure/types";
import { getComparison } from "@/lib/services/comparisons/load";
import { sideLabels, sideOfRun } from "@/lib/services/comparisons/schema";
import { type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";

/**
 * The plotted grid as CSV (RFC 4180): units in the header, decimal point always, a gap is an empty cell.
 * Engine channels stand at the points of their own, coarser grid.
 * @param labels how the sides are called, e.g. "R14"
 */
export function gridCsv(
  grid: PlottedGrid,
  labels: { a: string; b: string },
  result: CampaignResult | null = null,
): string {
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
    ...(result ? engineColumns(grid.rpm, labels, result) : []),
  ];
  const rows = grid.rpm.map((_, index) => columns.map(([, values]) => values[index] ?? null));
  return csvText([columns.map(([title]) => title), ...rows]);
}

/** Deviation of each mean curve from its local fit, and every engine channel that a side carries. */
function engineColumns(
  rpm: readonly number[],
  labels: { a: string; b: string },
  { sides, delta }: CampaignResult,
): [string, readonly (number | null)[]][] {
  const named = [
    { side: sides.A, name: `A ${labels.a}` },
    { side: sides.B, name: `B ${labels.b}` },
  ];
  const columns: [string, readonly (number | null)[]][] = named.flatMap(({ side, name }) =>
    side?.smoothness
      ? [
          [
            `deviation from the local fit ${name} [%]`,
            valuesOn(rpm, side.smoothness.rpm, side.smoothness.deviation_pct),
          ] as [string, readonly (number | null)[]],
        ]
      : [],
  );
  for (const channel of ENGINE_CHANNELS) {
    const title = channel.replaceAll("_", " ");
    const unit = `[${ENGINE_UNITS[channel]}]`;
    for (const { side, name } of named) {
      const load = side?.full_load;
      const found = load?.channels[channel];
      if (load && found) columns.push([`${title} ${name} ${unit}`, valuesOn(rpm, load.rpm, found.values)]);
    }
    const difference = delta?.channels?.[channel];
    if (!difference) continue;
    const differenceUnit = unit.replace("°C", "K");
    columns.push(
      [`${title} B minus A ${differenceUnit}`, valuesOn(rpm, difference.rpm, difference.difference)],
      [`${title} band low ${differenceUnit}`, valuesOn(rpm, difference.rpm, difference.low)],
      [`${title} band high ${differenceUnit}`, valuesOn(rpm, difference.rpm, difference.high)],
    );
  }
  return columns;
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
    csv: gridCsv(grid, labels, view.result),
  };
}
