import { digestOf } from "@/lib/canonical-json";
import { STANDARD_SETTINGS, toCampaignSettings } from "@/lib/services/comparisons/schema";

/** `settingsSha256` of the comparisons that gates, decisions and plans rest on. */
export const STANDARD_SHA256 = digestOf(toCampaignSettings(STANDARD_SETTINGS));
