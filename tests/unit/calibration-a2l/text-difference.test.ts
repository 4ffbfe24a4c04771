import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { textDifference } from "@/lib/calibration/a2l/text-difference";
import { asBytes } from "@/tests/support/description-text";

const file = (text: string, name = "a.a2l") => [{ name, bytes: asBytes(text) }];
const lines = (count: number, word = "line") => Array.from({ length: count }, (_, i) => `${word} ${i + 1}`);
const asText = (texts: string[]) => texts.map((text) => `${text}\n`).join("");
const shown = (a: string[], b: string[]) => textDifference(file(asText(a)), file(asText(b)));

describe("the difference of two descriptions", () => {
  it("is none for the same lines, whatever their ends and encodings", () => {
    const none = { hunks: [], added: 0, removed: 0, truncated: false };
    expect(textDifference(file("a\nb °\n"), file("a\r\nb °"))).toEqual(none);
    const latin = [{ name: "a.a2l", bytes: new Uint8Array([...asBytes("a\nb "), 0xb0]) }];
    expect(textDifference(file("a\nb °"), latin)).toEqual(none);
  });
  it("shows three lines around a change, with the line it starts at", () => {
    const a = lines(20);
    const b = a.with(9, "other");
    expect(shown(a, b)).toEqual({
      ...{ added: 1, removed: 1, truncated: false },
      hunks: [
        {
          ...{ fromA: 7, fromB: 7 },
          lines: [
            ...[7, 8, 9].map((i) => ({ kind: " ", text: `line ${i}` })),
            { kind: "-", text: "line 10" },
            { kind: "+", text: "other" },
            ...[11, 12, 13].map((i) => ({ kind: " ", text: `line ${i}` })),
          ],
        },
      ],
    });
  });
  it("changes six lines apart are one hunk, seven lines apart two", () => {
    const a = lines(40);
    expect(shown(a, a.with(10, "x").with(17, "y")).hunks?.length).toBe(1);
    expect(shown(a, a.with(10, "x").with(18, "y")).hunks?.map(({ fromA }) => fromA)).toEqual([8, 16]);
  });
  it("several files follow one another under their names", () => {
    const a = [...file("1", "m.a2l"), ...file("2", "p.a2l")];
    const b = [...file("1", "m.a2l"), ...file("3", "p.a2l")];
    expect(textDifference(a, b).hunks?.[0].lines.map(({ kind, text }) => kind + text)).toEqual([
      ...[" === m.a2l ===", " 1", " === p.a2l ===", "-2", "+3"],
    ]);
  });
  it("lists at most 2,000 lines and counts them all", () => {
    const difference = shown(lines(10), [...lines(10), ...lines(3000, "new")]);
    expect([difference.added, difference.removed, difference.truncated]).toEqual([3000, 0, true]);
    expect(difference.hunks?.reduce((sum, hunk) => sum + hunk.lines.length, 0)).toBe(2000);
  });
  it("is null for texts that have nothing in common", () => {
    expect(shown(lines(1500, "a"), lines(1500, "b"))).toEqual({
      hunks: null,
      added: 0,
      removed: 0,
      truncated: true,
    });
  });
  it("a line of a megabyte is cut", () => {
    const [hunk] = shown(["a"], ["b".repeat(1_000_000)]).hunks ?? [];
    expect(hunk.lines[1].text.length).toBe(501);
  });
  it("applied to the first text it gives the second (property)", () => {
    const text = fc.array(fc.constantFrom("a", "b", "c", "d"), { minLength: 1, maxLength: 40 });
    fc.assert(
      fc.property(text, text, (a, b) => {
        const { hunks, added, removed } = shown(a, b);
        const out: string[] = [];
        let at = 0;
        for (const hunk of hunks ?? []) {
          while (at < hunk.fromA - 1) out.push(a[at++]);
          expect(hunk.fromB).toBe(out.length + 1);
          for (const { kind, text: line } of hunk.lines) {
            if (kind !== "+") expect(a[at++]).toBe(line);
            if (kind !== "-") out.push(line);
          }
        }
        expect([...out, ...a.slice(at)]).toEqual(b);
        expect(a.length + added - removed).toBe(b.length);
      }),
      { numRuns: 1000, seed: 27 },
    );
  });
});
