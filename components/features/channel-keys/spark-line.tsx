const WIDTH = 120;
const HEIGHT = 28;

/** Pieces of a line between gaps, in the drawing's own units. */
function piecesOf(values: readonly (number | null)[]): string[] {
  const present = values.filter((value): value is number => value !== null);
  if (present.length === 0) return [];
  const low = Math.min(...present);
  const span = Math.max(...present) - low || 1;
  const stepX = WIDTH / Math.max(1, values.length - 1);
  const pieces: string[][] = [[]];
  values.forEach((value, index) => {
    if (value === null) pieces.push([]);
    else {
      const y = HEIGHT - 2 - ((value - low) / span) * (HEIGHT - 4);
      pieces.at(-1)?.push(`${(index * stepX).toFixed(1)},${y.toFixed(1)}`);
    }
  });
  return pieces.filter((piece) => piece.length > 0).map((piece) => `M${piece.join("L")}`);
}

/** The run of a column's values over the part that was read; the figures beside it say the same in numbers. */
export function SparkLine({ values }: { values: readonly (number | null)[] }) {
  const path = piecesOf(values).join("");
  if (path === "") return null;
  return (
    <svg
      aria-hidden="true"
      viewBox={`0 0 ${WIDTH} ${HEIGHT}`}
      className="h-7 w-[7.5rem] shrink-0 text-ink2"
      preserveAspectRatio="none"
    >
      <path d={path} fill="none" stroke="currentColor" strokeWidth="1.5" vectorEffect="non-scaling-stroke" />
    </svg>
  );
}
