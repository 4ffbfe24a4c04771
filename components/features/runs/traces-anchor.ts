/** Name by which links to a span of the log find the traces on the run page. */
export const TRACES_ANCHOR = "traces";
