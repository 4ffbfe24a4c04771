import { cleanup, render, screen } from "@testing-library/react";
import { afterEach, describe, expect, it } from "vitest";
import { DescriptionUnderstood } from "@/components/features/descriptions/description-understood";
import type { ShownDescription } from "@/lib/services/change-sets/schema";

afterEach(cleanup);

const summary = {
  ...{
    version: "1.71",
    project: "Marlin",
    modules: [{ name: "Engine", epk: null }],
    functions: 5,
    groups: 1,
  },
  ...{
    counts: { MAP: 2, VALUE: 1, AXIS_PTS: 1 },
    setNames: [],
    missingIncludes: ["<b>part</b>.a2l"],
    notes: [],
  },
  ...{ notRead: [{ keyword: "FRAME", name: "f", reason: "not used", line: 7 }], notReadCount: 3 },
};
const shown = (parts: Partial<ShownDescription>) => {
  const description = {
    id: "d",
    fileNames: ["<i>main</i>.a2l"],
    state: "read",
    failure: null,
    summary: null,
  };
  return render(
    <DescriptionUnderstood description={{ ...description, ...parts } as ShownDescription} epk={null} />,
  );
};

describe("what was understood of a description", () => {
  it("says what it holds, what is missing and what is not read; names stay text", () => {
    const { container } = shown({ summary });
    expect(screen.getByText("<i>main</i>.a2l")).toBeTruthy();
    expect(screen.getByText("<b>part</b>.a2l")).toBeTruthy();
    expect(container.querySelector("i, b")).toBeNull();
    expect(screen.getByText("ASAP2 1.71")).toBeTruthy();
    expect(screen.getByText("2 maps, 1 value, 1 shared axis")).toBeTruthy();
    expect(screen.getByText("The first 1 are listed.")).toBeTruthy();
  });

  it("says what to do while it is read, and why it was refused", () => {
    shown({ state: "reading" });
    expect(screen.getByText(/being read. Reload the page/)).toBeTruthy();
    cleanup();
    shown({ state: "refused", failure: "Line 8 is cut off." });
    expect(screen.getByText("Line 8 is cut off.")).toBeTruthy();
  });
});
