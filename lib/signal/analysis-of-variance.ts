/** One-way analysis of variance. */
export interface OneWayAnova {
  f: number;
  dfBetween: number;
  dfWithin: number;
  sumOfSquaresBetween: number;
  sumOfSquaresWithin: number;
}

/**
 * One-way analysis of variance of `groups` (each at least one value). The grand mean is subtracted first and the group
 * means are refined once, so that constant leading digits cost little. F is NaN when there is no spread within or only
 * one group. O(values).
 */
export function oneWayAnova(groups: readonly (readonly number[])[]): OneWayAnova {
  const all = groups.flat();
  const grand = refinedMean(all, all[0]);
  const centred = groups.map((group) => group.map((value) => value - grand));
  const offset = refinedMean(centred.flat(), 0);
  let between = 0;
  let within = 0;
  for (const group of centred) {
    const mean = refinedMean(group, 0);
    between += group.length * (mean - offset) ** 2;
    for (const value of group) within += (value - mean) ** 2;
  }
  const dfBetween = groups.length - 1;
  const dfWithin = all.length - groups.length;
  return {
    f: between / dfBetween / (within / dfWithin),
    dfBetween,
    dfWithin,
    sumOfSquaresBetween: between,
    sumOfSquaresWithin: within,
  };
}

function refinedMean(values: readonly number[], start: number): number {
  let mean = start;
  for (let pass = 0; pass < 2; pass++) {
    let sum = 0;
    for (const value of values) sum += value - mean;
    mean += sum / values.length;
  }
  return mean;
}
