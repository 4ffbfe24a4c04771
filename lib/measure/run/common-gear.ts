/**
 * The gear in which most pulls were driven; of equally many the lowest, a stated one before none (null = not stated). Null
 * without pulls.
 */
export function commonGear(gears: readonly (number | null)[]): number | null {
  const counts = new Map<number | null, number>();
  for (const gear of gears) counts.set(gear, (counts.get(gear) ?? 0) + 1);
  const rank = (gear: number | null) => gear ?? Number.POSITIVE_INFINITY;
  const [most] = [...counts].sort(([g1, n1], [g2, n2]) => n2 - n1 || rank(g1) - rank(g2));
  return most ? most[0] : null;
}
