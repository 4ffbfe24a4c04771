/** Place of a cell by axis, each from 0: cells run with the first axis fastest. [] for one value. */
export function cellIndex(cell: number, dims: readonly number[]): number[] {
  let rest = cell;
  return dims.map((n) => {
    const at = rest % n;
    rest = (rest - at) / n;
    return at;
  });
}
