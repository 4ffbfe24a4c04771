/** A number for a sentence, with a true minus sign. */
export function fixed(value: number, digits: number): string {
  return value.toFixed(digits).replace("-", "−");
}

/** A signed share in percent for a sentence, e.g. "+4.2 %". */
export function signedPercent(share: number, digits = 1): string {
  return `${share < 0 ? "" : "+"}${fixed(100 * share, digits)} %`;
}
