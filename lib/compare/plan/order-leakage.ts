/**
 * How much of a drift of degree `degree` (per run^degree) a plain difference of means B − A picks up: mean position^degree of
 * B minus that of A, positions counted from 1. Zero for degree 1 in a counterbalanced order such as A B B A.
 */
export function orderLeakage(sides: readonly ("A" | "B")[], degree: number): number {
  const meanOf = (side: "A" | "B") => {
    let sum = 0;
    let n = 0;
    sides.forEach((s, i) => {
      if (s !== side) return;
      sum += (i + 1) ** degree;
      n++;
    });
    return sum / n;
  };
  return meanOf("B") - meanOf("A");
}
