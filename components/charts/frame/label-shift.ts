/**
 * Moves labels that stand at the end of their curves apart until neighbours are `gap` from each other, keeping their
 * order and staying inside [top, bottom]. Returns the new positions in the order given.
 */
export function shiftLabels(wanted: readonly number[], gap: number, top: number, bottom: number): number[] {
  const order = wanted.map((y, index) => ({ y, index })).sort((a, b) => a.y - b.y || a.index - b.index);
  let floor = top;
  for (const label of order) {
    label.y = Math.max(label.y, floor);
    floor = label.y + gap;
  }
  let ceiling = bottom;
  for (const label of order.reverse()) {
    label.y = Math.min(label.y, ceiling);
    ceiling = label.y - gap;
  }
  const result = [...wanted];
  for (const label of order) result[label.index] = label.y;
  return result;
}
