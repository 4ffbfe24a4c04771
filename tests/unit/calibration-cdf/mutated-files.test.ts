import { describe, expect, it } from "vitest";
import { randomStream } from "@/lib/signal/random";
import { judgeValuesFile } from "../../fuzz/judge-values-file";
import { mutate } from "../../fuzz/mutate";
import { mutateElements, valuesFileSeeds } from "../../fuzz/values-file-seeds";

describe("values files that were damaged", () => {
  it("are read with shapes that add up, or refused with a listed code (1500 mutations, seed 71)", () => {
    const seeds = valuesFileSeeds();
    expect(seeds.map(judgeValuesFile)).toEqual(["read", "read", "read"]);
    const outcomes = new Map<string, number>();
    for (let k = 0; k < 1500; k++) {
      const random = randomStream(71, k);
      const bytes =
        k % 2 === 0
          ? mutate(seeds[random.nextBelow(3)], seeds[random.nextBelow(3)], random)
          : mutateElements(seeds[0], random);
      const outcome = judgeValuesFile(bytes);
      outcomes.set(outcome, (outcomes.get(outcome) ?? 0) + 1);
    }
    // Mutations reach both: files that are still read, and damage that is seen.
    expect(outcomes.get("read")).toBeGreaterThan(700);
    expect(outcomes.get("file_damaged")).toBeGreaterThan(500);
  });
});
