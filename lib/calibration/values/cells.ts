/** Letters of the axes, x first, as `NAME/x` and the titles of tables have them. */
export const AXIS_NAMES = ["x", "y", "z", "4", "5"] as const;

/** Number of cells of a table; one value has one. */
export function cellCount(dims: readonly number[]): number {
  return dims.reduce((product, n) => product * n, 1);
}

/** Number of a cell by its place on the axes: x fastest, then y, then z. */
export function cellNumber(index: readonly number[], dims: readonly number[]): number {
  let number = 0;
  for (let axis = dims.length - 1; axis >= 0; axis--) number = number * dims[axis] + (index[axis] ?? 0);
  return number;
}

/** Place on the axes of a cell by its number. */
export function cellIndex(number: number, dims: readonly number[]): number[] {
  let rest = number;
  return dims.map((n) => {
    const place = rest % n;
    rest = (rest - place) / n;
    return place;
  });
}
