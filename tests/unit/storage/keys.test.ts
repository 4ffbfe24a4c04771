import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { InvalidInputError } from "@/lib/errors";
import {
  blobKey,
  newProbeKey,
  newStagingKey,
  parseObjectKey,
  parseStagingKey,
  partKey,
  prefixOf,
  workspaceOfStaging,
} from "@/storage/keys";

const DIGEST = "a".repeat(64);
const BLOB_FORM = /^ws\/[0-9a-z-]+\/blob\/[0-9a-f]{64}$/;
const ANY_TEXT = fc.oneof(
  fc.string({ unit: "binary", maxLength: 300 }),
  fc.string({
    unit: fc.constantFrom("a", "0", "-", "/", ".", "..", "%2e", "\0", "\\", "\n", "é", "ws", "CON"),
    maxLength: 60,
  }),
  fc.constantFrom("..", "../..", "%2e%2e", "\u202e", "a".repeat(4096), "ws/x/blob", "A", ""),
);

function outcome(build: () => string): string | undefined {
  try {
    return build();
  } catch (error) {
    if (error instanceof InvalidInputError) return undefined;
    throw error;
  }
}

describe("keys", () => {
  test("any workspace and any digest give a key of the one form, or a refusal", () => {
    const digest = fc.oneof(ANY_TEXT, fc.constant(DIGEST));
    const check = (workspace: string, sha256: string) => {
      const key = outcome(() => blobKey(workspace, sha256));
      if (key !== undefined) expect(key).toMatch(BLOB_FORM);
      const allowed =
        /^[0-9a-z-]{1,64}$/.test(workspace) && /^[0-9a-f]{64}$/.test(sha256) && sha256.length === 64;
      expect(key !== undefined).toBe(allowed && !workspace.includes("\n") && !sha256.includes("\n"));
    };
    fc.assert(fc.property(ANY_TEXT, digest, check), { numRuns: 20_000 });
  });

  test("no text parses as a key unless it is built from its own parts again", () => {
    const shaped = fc.tuple(ANY_TEXT, ANY_TEXT, ANY_TEXT).map(([a, b, c]) => `ws/${a}/${b}/${c}`);
    const check = (text: string) => {
      const parsed = parseObjectKey(text);
      if (parsed?.kind === "blob") expect(blobKey(parsed.workspaceId, parsed.sha256)).toBe(text);
      if (parsed?.kind === "part") expect(partKey(parsed.staging, parsed.offsetBytes)).toBe(text);
    };
    fc.assert(fc.property(fc.oneof(shaped, ANY_TEXT), check), { numRuns: 20_000 });
  });

  test("reads back what it builds", () => {
    const staging = newStagingKey("workshop-1");
    expect(parseStagingKey(staging)).toBe(staging);
    expect(workspaceOfStaging(staging)).toBe("workshop-1");
    const key = partKey(staging, 8_388_608);
    const read = { kind: "part", key, workspaceId: "workshop-1", staging, offsetBytes: 8_388_608 };
    expect(parseObjectKey(key)).toEqual(read);
    const blob = blobKey("workshop-1", DIGEST);
    expect(parseObjectKey(blob)).toEqual({
      kind: "blob",
      key: blob,
      workspaceId: "workshop-1",
      sha256: DIGEST,
    });
    expect(parseObjectKey(newProbeKey())?.kind).toBe("probe");
    expect(newStagingKey("w")).not.toBe(newStagingKey("w"));
  });

  test("parts of one upload sort in the order of their bytes", () => {
    const staging = newStagingKey("w");
    const offsets = [0, 8_388_608, 16_777_216, 83_886_080, 1_000_000_000_000];
    const keys = offsets.map((offset) => partKey(staging, offset));
    expect([...keys].sort()).toEqual(keys);
  });

  test.each([-1, 0.5, Number.NaN, Number.POSITIVE_INFINITY, 1e15, 1e21])(
    "refuses %d as an offset",
    (offset) => {
      expect(() => partKey(newStagingKey("w"), offset)).toThrow(InvalidInputError);
    },
  );

  test("lists only whole folders", () => {
    expect(prefixOf({})).toBe("ws/");
    expect(prefixOf({ workspaceId: "w" })).toBe("ws/w/");
    expect(prefixOf({ workspaceId: "w", folder: "blob" })).toBe("ws/w/blob/");
    const staging = newStagingKey("w");
    expect(prefixOf(staging)).toBe(`${staging}/`);
    for (const workspaceId of ["", "..", "a/b", "W"]) {
      expect(() => prefixOf({ workspaceId })).toThrow(InvalidInputError);
    }
  });
});
