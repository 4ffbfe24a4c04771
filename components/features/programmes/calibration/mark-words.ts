import type { RelevanceMark } from "@/lib/calibration/changes/relevance";

/** What a mark names. */
export const SET_WORDS: Record<RelevanceMark["set"], string> = {
  function: "function",
  characteristic: "characteristic",
};

/** What a mark says. */
export const RELEVANCE_WORDS: Record<RelevanceMark["relevance"], string> = {
  emission: "emissions",
  safety: "safety",
};
