import { renderToStaticMarkup } from "react-dom/server";
import { describe, expect, it } from "vitest";
import { type MarkState, STATE_WORD, StateMark } from "@/components/ui/status/state-mark";

const STATES = Object.keys(STATE_WORD) as MarkState[];

describe("StateMark", () => {
  it("prints a word beside the icon for every state", () => {
    for (const state of STATES) {
      expect(renderToStaticMarkup(<StateMark state={state} />)).toContain(`>${STATE_WORD[state]}</span>`);
    }
  });

  it("draws a silhouette of its own for every state, so that it reads without colour", () => {
    const shapes = STATES.map(
      (state) => renderToStaticMarkup(<StateMark state={state} />).match(/<svg.*<\/svg>/s)?.[0],
    );
    expect(new Set(shapes).size).toBe(STATES.length);
  });

  it("keeps the word for assistive technology when only the icon is shown", () => {
    const markup = renderToStaticMarkup(<StateMark state="too_little" iconOnly />);
    expect(markup).toContain('<span class="sr-only">Too little</span>');
  });
});
