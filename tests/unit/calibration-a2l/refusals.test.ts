import { describe, expect, it } from "vitest";
import { readDescription } from "@/lib/calibration/a2l/read-description";
import { descriptionRefusal, inModule, readTexts } from "@/tests/support/description-text";
import { peakMemoryBytes } from "@/tests/support/peak-memory";

const refused = (files: Record<string, string | Uint8Array>) => descriptionRefusal(() => readTexts(files));
const main = (text: string) => refused({ "main.a2l": text });

describe("a description in doubt is refused with file, line and reason", () => {
  it.each([
    ["an empty file", "", "empty_file", "main.a2l is empty."],
    ["an image", "\u007fELF\u0000\u0000", "not_text", "main.a2l is no text"],
    ["another text", "Some words\nabout nothing.", "no_project", "main.a2l holds no PROJECT"],
    ["a project without a module", '/begin PROJECT P "" /end PROJECT', "no_module", "holds no MODULE"],
    [
      "a block that is never closed",
      inModule("\n/begin GROUP G"),
      "unbalanced_block",
      "Line 6 of main.a2l: /end MODULE does not close the block GROUP that was begun in line 5",
    ],
    [
      "a file that ends inside",
      '/begin PROJECT P ""\n/begin MODULE M ""',
      "unbalanced_block",
      "Line 2 of main.a2l: the block MODULE is never closed",
    ],
    [
      "an end too many",
      `${inModule("")}/end MODULE`,
      "unbalanced_block",
      "Line 7 of main.a2l: /end closes a block that was never begun.",
    ],
    [
      "blocks that cross",
      inModule("/begin GROUP G /begin SUB_GROUP a /end GROUP /end SUB_GROUP"),
      "unbalanced_block",
      "Line 4 of main.a2l: /end GROUP",
    ],
    [
      "a skipped block that crosses",
      inModule("/begin IF_DATA\n/end A2ML"),
      "unbalanced_block",
      "Line 5 of main.a2l: /end A2ML",
    ],
    [
      "a text that is never closed",
      inModule('/begin GROUP G\n"open'),
      "string_not_closed",
      "Line 5 of main.a2l: this text is never closed",
    ],
    [
      "a comment that is never closed",
      inModule("\n/* open"),
      "comment_not_closed",
      "Line 5 of main.a2l: this comment",
    ],
    [
      "an A2ML block without an end",
      inModule("/begin A2ML block"),
      "unbalanced_block",
      "Line 4 of main.a2l: the block A2ML is never closed",
    ],
    [
      "begin without a keyword",
      inModule('/begin "GROUP"'),
      "unexpected_text",
      "Line 4 of main.a2l: /begin is not followed",
    ],
    [
      "include without a name",
      inModule("/include"),
      "unexpected_text",
      "Line 4 of main.a2l: /include is not followed",
    ],
  ])("%s", (_, text, code, message) => {
    const outcome = main(text);
    expect(outcome.message).toContain(message);
    expect(outcome.code).toBe(code);
  });
  it("no file at all", () => {
    expect(descriptionRefusal(() => readDescription([])).code).toBe("empty_file");
  });
  it("a file that includes itself, and files that include one another", () => {
    expect(main(inModule("\n/include MAIN.A2L"))).toEqual({
      code: "include_cycle",
      message: "Line 5 of main.a2l: main.a2l includes main.a2l. Remove one of them.",
    });
    const circle = { "main.a2l": inModule("/include b"), b: "/include c", c: "\n/include b" };
    expect(refused(circle)).toEqual({
      code: "include_cycle",
      message: "Line 2 of c: main.a2l includes b includes c includes b. Remove one of them.",
    });
  });
  it("a sentence stays short, however long a name is", () => {
    const long = "N".repeat(100_000);
    for (const text of [
      inModule(`/begin ${long} /end X`),
      inModule(`/begin ${long}`),
      `/begin PROJECT ${long} "" /end PROJECT`,
    ])
      expect(main(text).message.length).toBeLessThan(700);
  });
  it("the file of an unclosed text is named where it is an included one", () => {
    expect(refused({ "main.a2l": inModule("/include b.a2l"), "b.a2l": '\n\n"open' }).message).toContain(
      "Line 3 of b.a2l",
    );
  });
});

/** Reads within a CPU time and memory that no machine needs unless something grows faster than the text. */
function bounded(text: string | Record<string, string>): { code: string; ms: number; mib: number } {
  const files = typeof text === "string" ? { "main.a2l": text } : text;
  const peak = peakMemoryBytes();
  const before = process.cpuUsage();
  const { code } = refused(files);
  const spent = process.cpuUsage(before);
  return { code, ms: (spent.user + spent.system) / 1000, mib: (peakMemoryBytes() - peak) / 2 ** 20 };
}
const MOST_MS = 8000;
/** How far the process's peak may grow; the longest of these texts has about 7 MB. */
const MOST_MIB = 256;

describe("a hostile description ends in a plain answer, in time in proportion to its size", () => {
  const characteristic = '/begin CHARACTERISTIC a "" VALUE 0 L 0 C 0 1 /end CHARACTERISTIC ';
  it.each([
    [
      "200,000 blocks in one another, closed",
      inModule("/begin X ".repeat(200_000) + "/end X ".repeat(200_000)),
      "read",
    ],
    ["200,000 blocks in one another, open", inModule("/begin X ".repeat(200_000)), "unbalanced_block"],
    ["200,000 known blocks in one another", inModule("/begin GROUP a ".repeat(200_000)), "unbalanced_block"],
    ["100,000 times the same name", inModule(characteristic.repeat(100_000)), "read"],
    [
      "100,000 broken blocks",
      inModule("/begin CHARACTERISTIC a /end CHARACTERISTIC ".repeat(100_000)),
      "read",
    ],
    [
      "100,000 unknown keywords",
      inModule(Array.from({ length: 100_000 }, (_, i) => `KEY_${i} 1`).join("\n")),
      "read",
    ],
    ["900,000 quotes", inModule('"'.repeat(900_001)), "string_not_closed"],
    ["900,000 comment starts", inModule("/* ".repeat(900_000)), "comment_not_closed"],
    ["900,000 stars in an open comment", inModule(`/*${"*".repeat(900_000)}`), "comment_not_closed"],
    [
      "900,000 quotes and ends in A2ML",
      inModule(`/begin A2ML ${'" /end '.repeat(100_000)}`),
      "unbalanced_block",
    ],
    ["900,000 slashes", inModule(`a${"/".repeat(900_000)}`), "read"],
    [
      "a number of a million digits",
      inModule(characteristic.replace("0 1", `0 ${"9".repeat(1_000_000)}`)),
      "read",
    ],
    [
      "a mask of a million digits",
      inModule(characteristic.replace("0 1", `0 1 BIT_MASK 0x${"F".repeat(1_000_000)}`)),
      "read",
    ],
    [
      "a table that announces 4 thousand million pairs",
      inModule('/begin COMPU_TAB T "" TAB_INTP 4000000000 1 2 /end COMPU_TAB'),
      "read",
    ],
    [
      "a fixed axis of a thousand million points",
      inModule(
        '/begin CHARACTERISTIC a "" CURVE 0 L 0 C 0 1 /begin AXIS_DESCR FIX_AXIS q c 9 0 1 FIX_AXIS_PAR_DIST 0 1 1000000000 /end AXIS_DESCR /end CHARACTERISTIC',
      ),
      "read",
    ],
    [
      "many fixed axes of 65,535 points",
      inModule(
        '/begin CHARACTERISTIC a "" CURVE 0 L 0 C 0 1 /begin AXIS_DESCR FIX_AXIS q c 9 0 1 FIX_AXIS_PAR 0 1 65535 /end AXIS_DESCR /end CHARACTERISTIC '.repeat(
          100,
        ),
      ),
      "too_large",
    ],
    [
      "a chain of 100,000 groups that ends in its first",
      inModule(
        Array.from(
          { length: 100_000 },
          (_, i) => `/begin GROUP g${i} "" /begin SUB_GROUP g${(i + 1) % 100_000} /end SUB_GROUP /end GROUP`,
        ).join("\n"),
      ),
      "read",
    ],
    [
      "40 files, each including the next twice",
      Object.fromEntries([
        ["main.a2l", inModule("/include f0 /include f0")],
        ...Array.from({ length: 40 }, (_, i) => [`f${i}`, `/include f${i + 1} /include f${i + 1}`]),
      ]),
      "too_large",
    ],
  ])("%s", { timeout: 60_000 }, (_, text, code) => {
    const outcome = bounded(text);
    expect(outcome.code).toBe(code);
    expect(outcome.ms).toBeLessThan(MOST_MS);
    expect(outcome.mib).toBeLessThan(MOST_MIB);
  });
  it("what can't all be listed is counted", () => {
    const description = readTexts({
      "main.a2l": inModule("/begin CHARACTERISTIC a /end CHARACTERISTIC\n".repeat(1500)),
    });
    expect(description.notRead.length).toBe(1000);
    expect(description.notes.map(({ message }) => message)).toEqual([
      "0 more notes and 500 more blocks that were not read are not listed.",
    ]);
  });
});
