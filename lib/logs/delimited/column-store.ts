/** Rows of a further piece where more rows come than were expected. */
const PIECE_ROWS = 8192;

/**
 * Columns whose length is only guessed beforehand: memory for the rows expected, and pieces for what comes beyond, joined at
 * the end column by column. Memory that no row was written to is never touched, so a guess too high costs none.
 * @param expectedRows at least 1
 */
export function createColumnStore(width: number, expectedRows: number) {
  let size = expectedRows;
  const fresh = () => Array.from({ length: width }, () => new Float64Array(size));
  const full: Float64Array[][] = [];
  let piece = fresh();
  let inPiece = 0;
  let before = 0;

  return {
    piece: () => piece,
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
      if (full.length === 0) return piece.map((column) => column.subarray(0, inPiece));
      return piece.map((last, c) => {
        const column = new Float64Array(before + inPiece);
        let at = 0;
        for (const part of full) {
          column.set(part[c], at);
          at += part[c].length;
          part[c] = new Float64Array(0);
        }
        column.set(last.subarray(0, inPiece), at);
        return column;
      });
    },
  };
}
