/** Version of the computation: printed with every result, raised whenever a number could move. */
export const ANALYSIS_VERSION = "1.1.1";
