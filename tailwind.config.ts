import type { Config } from "tailwindcss";

/** Every colour is a custom property of app/globals.css, where light and dark stand side by side. */
const token = (name: string) => `var(--${name})`;

const colors = {
  transparent: "transparent",
  current: "currentColor",
  paper: token("paper"),
  surface: token("surface"),
  sunk: token("sunk"),
  line: token("line"),
  edge: token("edge"),
  ink: token("ink"),
  ink2: token("ink2"),
  action: token("action"),
  "action-pressed": token("action-pressed"),
  "on-action": token("on-action"),
  focus: token("focus"),
  "side-a": token("side-a"),
  "side-b": token("side-b"),
  delta: token("delta"),
  met: token("met"),
  unmet: token("unmet"),
  thin: token("thin"),
};

export default {
  theme: {
    colors,
    fontFamily: {
      head: token("font-head"),
      sans: token("font-text"),
      num: token("font-num"),
    },
    fontSize: {
      "13": ["0.8125rem", "1.125rem"],
      "15": ["0.9375rem", "1.375rem"],
      "17": ["1.0625rem", "1.5rem"],
      "20": ["1.25rem", "1.625rem"],
      "26": ["1.625rem", "2rem"],
      "34": ["2.125rem", "2.5rem"],
    },
    borderRadius: { none: "0", DEFAULT: "3px", full: "9999px" },
    boxShadow: { none: "none" },
    extend: {
      minHeight: { control: token("control"), desk: "2.75rem", roadside: "3.5rem" },
      minWidth: { control: token("control") },
      maxWidth: { page: "77.5rem", prose: "68ch" },
    },
  },
} satisfies Config;
