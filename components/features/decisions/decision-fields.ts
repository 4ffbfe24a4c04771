import type { DecideInput } from "@/lib/services/decisions/schema";

/** What the lead had in view when the page was made. */
export interface SeenByLead {
  revisionId: string;
  rowVersion: number;
  standingRevisionId: string | null;
  comparisonId: string | null;
  inputSha256: string | null;
  shownInputSha256: string | null;
  gatePlanVersion: number | null;
  calibrationSha256: string | null;
}

/** The fields of the form, all of them whatever is chosen: changing one's mind loses nothing. */
export interface DecisionFields {
  kind: DecideInput["kind"] | "";
  reason: string;
  typedNumber: string;
  passphrase: string;
  waivers: { gateId: string; reason: string }[];
  /** Both empty: no document is named. */
  approval: { document: string; issuer: string };
}

/** What is sent for the decision chosen: a hold carries no waivers and no typed number. */
export function toDecideInput(fields: DecisionFields, seen: SeenByLead): unknown {
  const { kind, reason, passphrase, typedNumber, waivers, approval } = fields;
  const { gatePlanVersion, ...base } = seen;
  const common = { kind, ...base, reason, passphrase };
  if (kind !== "promote") return common;
  const isNamed = approval.document.trim() !== "" || approval.issuer.trim() !== "";
  return { ...common, gatePlanVersion, typedNumber, waivers, approval: isNamed ? approval : null };
}
