/** Rows that a values table prints at most; a finer grid is printed at every n-th point. */
const MOST_ROWS = 60;

/** Smallest n of 1, 2, 5, 10, 20 … such that every n-th of `count` points gives at most 60 rows. */
export function tableStep(count: number): number {
  for (let decade = 1; ; decade *= 10) {
    for (const step of [decade, 2 * decade, 5 * decade]) {
      if (count / step <= MOST_ROWS) return step;
    }
  }
}
