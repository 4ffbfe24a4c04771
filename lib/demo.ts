/** What every demo person signs with; printed on the demo page. It opens nothing outside the sample workspace. */
export const DEMO_PASSPHRASE = "two passes one decision";
