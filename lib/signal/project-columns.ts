/** project-columns.wat, assembled; a test assembles it again and compares. */
export const PROJECTION_MODULE = Uint8Array.from(
  atob(
    [
      "AGFzbQEAAAABCgFgBn9/f39/fwADAgEABQMBAAEHFAIGbWVtb3J5AgAHcHJvamVjdAAACp0DAZoDAgJ/C3sDQP0MAAAAAAAAAAAAAAAAAAAAAC",
      "EN/QwAAAAAAAAAAAAAAAAAAAAAIQ79DAAAAAAAAAAAAAAAAAAAAAAhD/0MAAAAAAAAAAAAAAAAAAAAACEQ/QwAAAAAAAAAAAAAAAAAAAAAIRH9",
      "DAAAAAAAAAAAAAAAAAAAAAAhEiACIQYgASEHA0AgAP0ABAAhCCAA/QAEECEJIAf9CgMAIQogB/0KAwghCyAH/QoDECEMIA0gCiAI/fIB/fABIQ",
      "0gDiALIAj98gH98AEhDiAPIAwgCP3yAf3wASEPIBAgCiAJ/fIB/fABIRAgESALIAn98gH98AEhESASIAwgCf3yAf3wASESIABBIGohACAHQRhq",
      "IQcgBkEBayIGDQALIAQgD/0LBAAgBCAS/QsEECAFIAX9AAQAIA0gDf3yASAOIA798gH98AEgDyAP/fIB/fAB/fAB/QsEACAFIAX9AAQQIBAgEP",
      "3yASARIBH98gH98AEgEiAS/fIB/fAB/fAB/QsEECAEQSBqIQQgBUEgaiEFIANBAWsiAw0ACws=",
    ].join(""),
  ),
  (character) => character.charCodeAt(0),
);

const PAGE_BYTES = 65_536;
const DOUBLE_BYTES = 8;
/** Directions that are projected on at once. */
export const LANES = 3;
/** Columns that are projected side by side. */
const ABREAST = 4;

/** A set of columns, laid out for repeated projections. */
export interface ColumnProjector {
  /** To be filled before `project`: for each row its weight in the three directions; a direction that is not needed is zero. */
  directions: Float64Array;
  /** Adds the squares of the three projections of each column to `squares`, and writes the third one to `last`. */
  project(): void;
  /** One a column, then up to three of padding. */
  last: Float64Array;
  squares: Float64Array;
}

type Project = (
  data: number,
  directions: number,
  rows: number,
  fours: number,
  last: number,
  squares: number,
) => void;

/** One instance for all: the engine compiles the way into it only after some calls. */
let exports: WebAssembly.Exports | undefined;

/**
 * Lays sets of columns of `rows` numbers (one after the other, no gaps) out for projections in WebAssembly, two columns in
 * each vector register. Sums run row by row as in plain code, so that the figures are the same to the last bit everywhere.
 * O(columns · rows) a projection. No set may be empty. All sets share one memory: the next call takes it over.
 */
export function columnProjectors(sets: readonly Float64Array[], rows: number): ColumnProjector[] {
  exports ??= new WebAssembly.Instance(new WebAssembly.Module(PROJECTION_MODULE)).exports;
  const memory = exports.memory as WebAssembly.Memory;
  const project = exports.project as Project;
  const padded = sets.map((data) => Math.ceil(data.length / rows / ABREAST) * ABREAST);
  const doubles = padded.reduce((sum, columns) => sum + columns * (rows + 2) + LANES * rows, 0);
  const lacking = Math.ceil((doubles * DOUBLE_BYTES - memory.buffer.byteLength) / PAGE_BYTES);
  if (lacking > 0) memory.grow(lacking);
  new Float64Array(memory.buffer, 0, doubles).fill(0);
  let next = 0;
  const room = (length: number) => {
    const array = new Float64Array(memory.buffer, next, length);
    next += length * DOUBLE_BYTES;
    return array;
  };
  return sets.map((columns, set) => {
    const data = room(padded[set] * rows);
    for (let i = 0; i < columns.length; i++) {
      const column = Math.floor(i / rows);
      const four = column - (column % ABREAST);
      data[four * rows + (i % rows) * ABREAST + (column - four)] = columns[i];
    }
    const [last, squares, directions] = [room(padded[set]), room(padded[set]), room(LANES * rows)];
    const fours = padded[set] / ABREAST;
    return {
      directions,
      last,
      squares,
      project: () =>
        project(data.byteOffset, directions.byteOffset, rows, fours, last.byteOffset, squares.byteOffset),
    };
  });
}
