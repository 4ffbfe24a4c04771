/**
 * Projects columns of `n` numbers on three directions at once: the third projection goes to `last`, the sum of the three
 * squares is added to `squares`, both at the column's own index. Two columns side by side make six sums, which stay in a
 * processor's registers. O(columns · n).
 * @param data columns one after the other, padded with a column of zeros to an even count
 * @param directions `n` rows of three weights; a direction that is not needed is zero
 * @param columns index of each column in `last` and `squares`
 */
export function projectColumns(
  data: Float64Array,
  directions: Float64Array,
  columns: Int32Array,
  last: Float64Array,
  squares: Float64Array,
): void {
  const size = directions.length;
  const n = size / 3;
  const count = columns.length;
  for (let c = 0; c < count; c += 2) {
    let at = c * n;
    let a0 = 0;
    let a1 = 0;
    let a2 = 0;
    let b0 = 0;
    let b1 = 0;
    let b2 = 0;
    for (let i = 0; i < size; i += 3) {
      const x = data[at];
      const y = data[at + n];
      at++;
      const u = directions[i];
      const v = directions[i + 1];
      const w = directions[i + 2];
      a0 += u * x;
      a1 += v * x;
      a2 += w * x;
      b0 += u * y;
      b1 += v * y;
      b2 += w * y;
    }
    const first = columns[c];
    last[first] = a2;
    squares[first] += a0 * a0 + a1 * a1 + a2 * a2;
    if (c + 1 === count) break;
    const second = columns[c + 1];
    last[second] = b2;
    squares[second] += b0 * b0 + b1 * b1 + b2 * b2;
  }
}
