import { InvalidInputError } from "@/lib/errors";
import type { Leg, Reason } from "@/lib/measure/types";
import { leastSquares } from "@/lib/signal/least-squares";

/** One usable pull of a comparison. */
export interface ComparedRun {
  id: string;
  side: string;
  leg: Leg | null;
  order: number | null;
  roadDay: string | null;
}

/** The linear model of a comparison: one row a run, `columns` columns, side B in column `side`, order in column `order` if used. */
export interface RunDesign {
  matrix: Float64Array;
  columns: number;
  side: number;
  order: number | null;
  names: string[];
  warnings: Reason[];
  /** How much the other columns widen the interval of the side: 1 = not at all. */
  inflation: number;
}

/**
 * Builds mean + side + leg + order (+ road day), leaving out what does not vary or is not known, with a warning where that
 * costs something. Null with warnings when the side can't be told apart from a column that must stay.
 */
export function runDesign(runs: readonly ComparedRun[], b: string): RunDesign | { warnings: Reason[] } {
  const warnings: Reason[] = [];
  const columns: { name: string; values: number[] }[] = [
    { name: "mean", values: runs.map(() => 1) },
    { name: "side", values: runs.map((run) => (run.side === b ? 1 : 0)) },
  ];
  const legs = new Set(runs.map((run) => run.leg));
  if (legs.has(null)) {
    warnings.push({
      code: "leg_not_known",
      message:
        "Some runs don't say whether they went out or back, so wind and slope can't be taken out of the difference. State the leg of every run.",
    });
  } else if (legs.size === 1) {
    warnings.push({
      code: "one_direction",
      message:
        "All runs went the same way. Wind that changed between the sides shows as a gain or loss; drive out and back on each side.",
    });
  } else columns.push({ name: "leg", values: runs.map((run) => (run.leg === "out" ? 0.5 : -0.5)) });
  if (runs.some((run) => run.order === null)) {
    warnings.push({
      code: "order_not_known",
      message:
        "Some runs have no place in the order, so drift can't be taken out. Number the runs in the order driven.",
    });
  } else {
    const orders = runs.map((run) => run.order ?? 0);
    const centre = orders.reduce((sum, x) => sum + x, 0) / orders.length;
    if (new Set(orders).size > 2) columns.push({ name: "order", values: orders.map((x) => x - centre) });
  }
  const days = [...new Set(runs.map((run) => run.roadDay))];
  for (const day of days.slice(1))
    columns.push({ name: "road day", values: runs.map((run) => (run.roadDay === day ? 1 : 0)) });

  const matrix = Float64Array.from(runs.flatMap((_, r) => columns.map((column) => column.values[r])));
  try {
    const fit = leastSquares(matrix, new Float64Array(runs.length), columns.length);
    const side = columns[1].values;
    const share = side.reduce((sum, x) => sum + x, 0) / side.length;
    const alone = 1 / (runs.length * share * (1 - share));
    const inflation = fit.unscaledCovariance[columns.length + 1] / alone;
    if (inflation > 2) {
      warnings.push({
        code: "order_cannot_separate",
        message: `The order of the runs can't tell drift${days.length > 1 ? " and road day" : ""} from the change: the interval is ${Math.sqrt(inflation).toFixed(1)} times as wide as in a counterbalanced order. Drive A B B A in twins.`,
      });
    }
    const order = columns.findIndex((column) => column.name === "order");
    return {
      matrix,
      columns: columns.length,
      side: 1,
      order: order < 0 ? null : order,
      names: columns.map((c) => c.name),
      warnings,
      inflation,
    };
  } catch (error) {
    if (!(error instanceof InvalidInputError)) throw error;
    warnings.push({
      code: error.code === "too_few_rows" ? "too_few_runs" : "side_not_separable",
      message:
        error.code === "too_few_rows"
          ? "There are fewer runs than the comparison has unknowns (side, leg, order). Drive more twins."
          : "The side goes hand in hand with the leg, the order or the road day, so what the change did can't be told apart from it. Drive both sides out and back on the same day, in turns.",
    });
    return { warnings };
  }
}

/** The rows of a row-major matrix that are named, in that order. */
export function rowsOf(matrix: Float64Array, columns: number, rows: readonly number[]): Float64Array {
  return Float64Array.from(rows.flatMap((r) => [...matrix.subarray(r * columns, (r + 1) * columns)]));
}

/** Degrees of freedom that a fit must leave to tell scatter. */
const LEAST_DF = 2;

/**
 * Tells of any rows of a design whether its model can still be fitted to them with scatter left to tell: not where they all went
 * the same way, say, since the other leg did not reach this engine speed. Each choice of rows is tried once.
 */
export function carriedBy({
  matrix,
  columns,
}: Pick<RunDesign, "matrix" | "columns">): (rows: readonly number[]) => boolean {
  const known = new Map<string, boolean>();
  const tried = (rows: readonly number[]): boolean => {
    if (rows.length - columns < LEAST_DF) return false;
    try {
      leastSquares(rowsOf(matrix, columns, rows), new Float64Array(rows.length), columns);
      return true;
    } catch (error) {
      if (!(error instanceof InvalidInputError)) throw error;
      return false;
    }
  };
  return (rows) => {
    const key = rows.join();
    const found = known.get(key) ?? tried(rows);
    known.set(key, found);
    return found;
  };
}
