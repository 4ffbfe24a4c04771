/** Rows of a further piece where more rows come than were expected. */
const PIECE_ROWS = 8192;

/**
 * Columns whose length is only guessed beforehand: memory for the rows expected, and pieces for what comes beyond, joined at
 * the end. Memory that no row was written to is never touched, so a guess too high costs none.
 * @param expectedRows at least 1
 */
export function createColumnStore(width: number, expectedRows: number) {
  let size = expectedRows;
  // One array for all columns of a piece: whoever writes a cell then looks in one place only.
  const fresh = () => new Float64Array(width * size);
  const columnOf = (cells: Float64Array, column: number) => {
    const stride = cells.length / width;
    return cells.subarray(column * stride, (column + 1) * stride);
  };
  const full: Float64Array[] = [];
  let piece = fresh();
  let inPiece = 0;
  let before = 0;

  return {
    /** Column after column, each `stride` rows long. */
    piece: () => ({ cells: piece, stride: size }),
    rows: () => before + inPiece,
    /** Keeps the row written last; gives the place of the next one, 0 in a new piece. */
    keepRow(): number {
      inPiece++;
      if (inPiece < size) return inPiece;
      full.push(piece);
      before += size;
      size = PIECE_ROWS;
      piece = fresh();
      inPiece = 0;
      return 0;
    },
    /** The columns in full. Call once, at the end. */
    finish(): Float64Array[] {
      const all = Array.from({ length: width }, (_, c) => c);
      if (full.length === 0) return all.map((c) => columnOf(piece, c).subarray(0, inPiece));
      return all.map((c) => {
        const column = new Float64Array(before + inPiece);
        let at = 0;
        for (const cells of full) {
          column.set(columnOf(cells, c), at);
          at += cells.length / width;
        }
        column.set(columnOf(piece, c).subarray(0, inPiece), at);
        return column;
      });
    },
  };
}
