import { renderToStaticMarkup } from "react-dom/server";
import { describe, expect, it } from "vitest";
import { AirMethods } from "@/app/methods/air-methods";
import { CalibrationMethods } from "@/app/methods/calibration-methods";
import { ComparisonMethods } from "@/app/methods/comparison-methods";
import { METHOD_CONTENTS } from "@/app/methods/contents";
import { JudgingMethods } from "@/app/methods/judging-methods";
import { MotionMethods } from "@/app/methods/motion-methods";
import { UncertaintyMethods } from "@/app/methods/uncertainty-methods";
import { FACTOR_RULES } from "@/lib/measure/air/atmosphere";

const markup = renderToStaticMarkup(
  <>
    <MotionMethods />
    <JudgingMethods />
    <AirMethods />
    <UncertaintyMethods />
    <ComparisonMethods />
    <CalibrationMethods />
  </>,
);
const page = document.createElement("div");
page.innerHTML = markup;

describe("the methods page", () => {
  it("has one heading for every entry of its contents, in the same order, and none besides", () => {
    expect([...page.querySelectorAll("h2")].map((heading) => heading.id)).toEqual(
      METHOD_CONTENTS.map(([id]) => id),
    );
  });

  it("names a source and limits for every method", () => {
    for (const section of page.querySelectorAll("section")) {
      const terms = [...section.querySelectorAll("dt")].map((term) => term.textContent);
      expect(terms).toEqual(["Source", "Limits"]);
      for (const text of section.querySelectorAll("dd")) expect(text.textContent?.length).toBeGreaterThan(15);
    }
  });

  it("lists every weather factor that the computation knows, with its formula", () => {
    const rows = [...page.querySelectorAll("tbody tr")]
      .filter((row) => row.querySelector("th code"))
      .map((row) => row.textContent ?? "");
    expect(rows).toHaveLength(Object.keys(FACTOR_RULES).length);
    for (const [id, rule] of Object.entries(FACTOR_RULES)) {
      expect(rows.some((row) => row.startsWith(id) && row.includes(rule.formula))).toBe(true);
    }
  });

  it("claims no conformity", () => {
    expect(page.textContent).not.toMatch(/certified|complies with|in accordance with/i);
    expect(page.textContent).toContain("claims no conformity");
  });

  it("carries no style attribute", () => {
    expect(markup).not.toMatch(/\sstyle=/);
  });
});
