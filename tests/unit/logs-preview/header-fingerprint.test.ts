import { readFileSync } from "node:fs";
import { gunzipSync } from "node:zlib";
import { describe, expect, test } from "vitest";
import { findHeader, headerFingerprint, type LogHeader } from "@/lib/logs/preview/header-fingerprint";

const HEADER: LogHeader = {
  format: "delimited",
  delimiter: ";",
  titles: ["Time [s]", "Speed [km/h]"],
  units: [null, "km/h"],
};
const golden = (name: string) =>
  gunzipSync(readFileSync(new URL(`../../golden/logs/${name}.gz`, import.meta.url)));
const whole = (bytes: Uint8Array) => ({ bytes, complete: true });
const ofFile = (bytes: Uint8Array) => {
  const header = findHeader(whole(bytes));
  return header && headerFingerprint(header);
};

describe("the fingerprint of a header", () => {
  test("is the SHA-256 of format, delimiter, titles and units", () => {
    // GNU coreutils: printf '%s' '["delimited",";",["Time [s]","Speed [km/h]"],[null,"km/h"]]' | sha256sum
    expect(headerFingerprint(HEADER)).toBe(
      "de194aac71d58561644b11ff866692af43028893fcb322f659d90c99be12c5db",
    );
  });

  test("does not see blanks and how a letter is composed, but everything else", () => {
    const first = headerFingerprint({ ...HEADER, titles: ["Öl  temp", " p "] });
    expect(headerFingerprint({ ...HEADER, titles: ["O\u0308l temp", "p"] })).toBe(first);
    for (const other of [
      { ...HEADER, titles: ["Speed [km/h]", "Time [s]"] },
      { ...HEADER, units: [null, "mph"] },
      { ...HEADER, units: [null, null] },
      { ...HEADER, format: "gpx" as const },
      { ...HEADER, delimiter: "," },
    ])
      expect(headerFingerprint(other)).not.toBe(headerFingerprint(HEADER));
  });

  test("is the same for every recording of one logger, and another for every dialect", () => {
    const names = [
      "d01_comma_bracket_units.csv",
      "d02_semicolon_decimal_comma_crlf.csv",
      "d03_unit_row_bom.csv",
      "d05_latin1_german.csv",
      "d06_mph_psi_fahrenheit.csv",
    ];
    const prints = names.map((name) => {
      const log = golden(`dialects/${name}`);
      const part = log.subarray(0, log.lastIndexOf(10, log.length / 3) + 1);
      expect(ofFile(part)).toBe(ofFile(log));
      return ofFile(log);
    });
    expect(prints).not.toContain(null);
    expect(new Set(prints).size).toBe(names.length);
  });

  test("is there although the decimal mark is in doubt, and not for what is no log", () => {
    const rows = Array.from({ length: 20 }, (_, i) => `${i};1,${100 + i}`);
    const doubt = ofFile(Buffer.from(["t [s];v [km/h]", ...rows].join("\n")));
    const clear = ofFile(Buffer.from("t [s];v [km/h]\n0;1,5\n1;2,5\n2;3,25\n"));
    expect(doubt).toBe(clear);
    expect(doubt).toMatch(/^[0-9a-f]{64}$/);
    expect(ofFile(golden("broken/b07_binary_junk.csv"))).toBeNull();
    expect(ofFile(Buffer.alloc(0))).toBeNull();
  });

  test("of MDF 4 is that of its channels and their units", () => {
    const header = findHeader(whole(golden("mdf/made_dt.mf4")));
    const deflated = findHeader(whole(golden("mdf/made_dz0_deflate.mf4")));
    expect(header?.titles.length).toBeGreaterThan(2);
    // The same signals, packed another way (tests/golden/README.md, logs/mdf).
    expect(deflated).toEqual(header);
  });
});
