import { describe, expect, it } from "vitest";
import { commonGear } from "@/lib/measure/run/common-gear";

// Expected by counting on the fingers.
describe("The gear that is compared", () => {
  it.each<[string, (number | null)[], number | null]>([
    ["that of most pulls", [3, 4, 4, 3, 4], 4],
    ["of two as common the lower, whichever was driven first", [4, 3, 3, 4], 3],
    ["the same the other way round", [3, 4, 4, 3], 3],
    ["a stated gear before none", [null, 4, null, 4], 4],
    ["none where most do not state it", [null, null, 4], null],
    ["none without pulls", [], null],
  ])("is %s", (_, gears, gear) => expect(commonGear(gears)).toBe(gear));
});
