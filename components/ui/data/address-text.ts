/** An address as the trade writes it: 0x810000. */
export const addressText = (address: number): string =>
  `0x${address.toString(16).toUpperCase().padStart(6, "0")}`;
