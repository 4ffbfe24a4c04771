/** What the image reader understood, kept for display; the bytes stay the authority. */
export interface ImageSummary {
  container: string;
  /** SHA-256 over addresses, lengths and bytes of the merged, sorted segments: the same content in any container. */
  identity: string;
  segments: { address: number; length: number }[];
  problems: string[];
}

/** Where two images differ, shortened for a page. */
export interface ImageDifference {
  /** How many stretches differ, and how many bytes they hold together. */
  ranges: number;
  bytes: number;
  /** The first stretches, lowest address first. */
  first: { address: number; length: number }[];
}
