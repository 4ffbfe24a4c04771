import { z } from "zod";

export const WAIVER_REASON_MIN = 20;

/** What a decision's signature means, printed beside the name. */
export const MEANING = {
  as_found: "adopted as found: this is the image the car came with",
  promote: "approved for release: this revision stands",
  hold: "held: more runs are needed before a decision",
  turn_down: "turned down: this revision is not released",
  roll_back: "rolled back: the earlier revision stands again",
} as const;

const reason = z
  .string()
  .trim()
  .min(1, "Write the reason: it is printed on the record.")
  .max(2000, "A reason has at most 2,000 characters.");
const passphrase = z.string().min(1, "Sign with your passphrase.").max(200);
const sha256 = z.string().regex(/^[0-9a-f]{64}$/);

/** What the lead had in view; a decision is refused when any of it has moved. */
const seen = {
  rowVersion: z.coerce.number().int(),
  standingRevisionId: z.uuid().nullable(),
  comparisonId: z.uuid().nullable(),
  /** Of what counted then. */
  inputSha256: sha256.nullable(),
  /** Of what the result shown was computed from; another one when stale. */
  shownInputSha256: sha256.nullable(),
  /** Of what changed in the calibration, its coverage, checks and marks; null: nothing of it was known yet. */
  calibrationSha256: sha256.nullable().default(null),
};

const waiver = z.strictObject({
  gateId: z.string().min(1).max(100),
  reason: z
    .string()
    .trim()
    .min(
      WAIVER_REASON_MIN,
      `A waiver needs a reason of at least ${WAIVER_REASON_MIN} characters: it stays on the record for ever.`,
    )
    .max(2000),
});

/** A document by which somebody approved the change of emission- or safety-relevant functions. */
const approval = z.strictObject({
  document: z.string().trim().min(1, "Name the document or its number.").max(200),
  issuer: z.string().trim().min(1, "Say who issued the document.").max(200),
});

const typedNumber = z
  .string()
  .trim()
  .min(1, "Type the number of the revision, e.g. R15.")
  .max(12, "Type the number of the revision, e.g. R15.");

export const promoteInput = z.strictObject({
  revisionId: z.uuid(),
  ...seen,
  gatePlanVersion: z.coerce.number().int().nullable(),
  typedNumber,
  reason,
  waivers: z.array(waiver).max(50),
  approval: approval.nullable().default(null),
  passphrase,
});
export type PromoteInput = z.input<typeof promoteInput>;

export const holdInput = z.strictObject({ revisionId: z.uuid(), ...seen, reason, passphrase });
export type HoldInput = z.input<typeof holdInput>;

export const turnDownInput = holdInput;
export type TurnDownInput = HoldInput;

export const agreeInput = z.strictObject({
  revisionId: z.uuid(),
  /** Of the change set and of what in it is marked, as the lead saw it. */
  touchedSha256: sha256,
  reason,
  passphrase,
});
export type AgreeInput = z.input<typeof agreeInput>;

export const rollBackInput = z.strictObject({
  programmeId: z.uuid(),
  toRevisionId: z.uuid(),
  standingRevisionId: z.uuid(),
  typedNumber,
  reason,
  passphrase,
});
export type RollBackInput = z.input<typeof rollBackInput>;

/** Whether what was typed names the revision: "R15", "r15" and "15" do. */
export function namesRevision(typed: string, number: number): boolean {
  return typed.trim().replace(/^r/i, "") === String(number);
}

/** What the countersign form sends: one of three decisions. */
export const decideInput = z.discriminatedUnion("kind", [
  promoteInput.extend({ kind: z.literal("promote") }),
  holdInput.extend({ kind: z.literal("hold") }),
  turnDownInput.extend({ kind: z.literal("turn_down") }),
]);
export type DecideInput = z.output<typeof decideInput>;
