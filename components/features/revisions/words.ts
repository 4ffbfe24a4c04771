/** What a revision may be intended for, as the pages say it. */
export const INTENDED_USE_WORDS: Record<string, string> = {
  road: "Road use, where locally approved",
  closed_course: "Closed course only",
  bench: "Bench only",
};

/** States of a revision in the words of the pages. */
export const REVISION_STATE_WORDS: Record<string, string> = {
  draft: "draft",
  validating: "validating",
  in_review: "in review",
  promoted: "stands",
  superseded: "superseded",
  turned_down: "turned down",
  withdrawn: "withdrawn",
  rolled_back: "rolled back",
};
