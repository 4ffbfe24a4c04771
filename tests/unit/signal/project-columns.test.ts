import { readFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import { expect, test } from "vitest";
import wabt from "wabt";
import { columnProjectors, LANES, PROJECTION_MODULE } from "@/lib/signal/project-columns";
import { randomStream } from "@/lib/signal/random";

const SOURCE = fileURLToPath(new URL("../../../lib/signal/project-columns.wat", import.meta.url));

test("the embedded module is its source, assembled", async () => {
  const parsed = (await wabt()).parseWat("project-columns.wat", readFileSync(SOURCE, "utf8"), { simd: true });
  expect([...PROJECTION_MODULE]).toEqual([...parsed.toBinary({}).buffer]);
});

test.each([
  [[1], 3],
  [[4], 16],
  [[121, 7], 11],
  // Beyond the first page of memory.
  [[700, 2, 900], 24],
])("projections of %j columns of %i rows are the sums of products, to the last bit", (counts, rows) => {
  const random = randomStream(7, rows);
  const sets = counts.map((count) => Float64Array.from({ length: count * rows }, () => random.nextNormal()));
  const projectors = columnProjectors(sets, rows);
  projectors.forEach((projector, set) => {
    const columns = Array.from({ length: counts[set] }, (_, c) =>
      sets[set].subarray(c * rows, (c + 1) * rows),
    );
    const squares = columns.map(() => 0);
    // Two passes: squares add up, the last projection is the second pass's.
    for (let pass = 0; pass < 2; pass++) {
      for (let i = 0; i < LANES * rows; i++) projector.directions[i] = random.nextNormal();
      projector.project();
      columns.forEach((column, c) => {
        const [a, b, last] = [0, 1, 2].map((lane) =>
          column.reduce((sum, x, r) => sum + projector.directions[LANES * r + lane] * x, 0),
        );
        squares[c] += a * a + b * b + last * last;
        expect(projector.last[c]).toBe(last);
        expect(projector.squares[c]).toBe(squares[c]);
      });
    }
  });
});
