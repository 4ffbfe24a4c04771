import { readdirSync, readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { checkValues } from "../../support/check-values";

/** Where each topic's records are tested; a record must be named there by its id or by a dotted prefix of it. */
const FILES: Record<string, string[]> = {
  atmosphere: ["measure/atmosphere.test.ts"],
  "road load": ["measure/road-load.test.ts"],
  "wind and grade": ["measure/road-load.test.ts"],
  power: ["measure/vehicle.test.ts"],
  acceleration: ["measure/acceleration.test.ts"],
  "engine channels": ["measure/vehicle.test.ts"],
  trade: ["measure/vehicle.test.ts", "measure/acceleration.test.ts"],
  differentiation: ["signal/"],
  comparison: ["compare/", "signal/"],
};

const unit = new URL("../", import.meta.url);
const sources = readdirSync(unit, { recursive: true, encoding: "utf8" })
  .filter((name) => name.endsWith(".test.ts"))
  .map((name) => ({ name, text: readFileSync(new URL(name, unit), "utf8") }));

function names(text: string, id: string): boolean {
  if (text.includes(`"${id}"`)) return true;
  const first = id.indexOf(".") + 1;
  for (let cut = id.length - 1; cut >= first; cut--) {
    const prefix = id.slice(0, cut);
    if (prefix.endsWith(".") && text.includes(`"${prefix}"`)) return true;
    if (text.includes(`\`${prefix}\${`)) return true;
  }
  return false;
}

describe("every check value is tested", () => {
  for (const [topic, files] of Object.entries(FILES)) {
    it(`${topic}: ${files.join(", ")}`, () => {
      const readers = sources.filter((source) => files.some((file) => source.name.startsWith(file)));
      const missing = checkValues("")
        .filter((value) => value.topic === topic)
        .filter((value) => !readers.some((source) => names(source.text, value.id)))
        .map((value) => value.id);
      expect(missing).toEqual([]);
    });
  }
  it("no topic is unknown", () => {
    expect([...new Set(checkValues("").map((value) => value.topic))].sort()).toEqual(
      Object.keys(FILES).sort(),
    );
  });
});
