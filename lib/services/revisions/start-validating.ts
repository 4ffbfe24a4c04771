import type { RevisionRow } from "@/db/queries/revisions";
import { InvalidInputError } from "@/lib/errors";
import type { Ctx } from "@/lib/services/ctx";
import { stepRevision } from "@/lib/services/revisions/step";

/** What a draft still needs before runs may be driven with it, in plain sentences; empty when nothing. */
export function missingForValidating(
  row: Pick<RevisionRow, "changeReason" | "intendedUse" | "touchesEmissionOrSafety">,
): string[] {
  return [
    row.changeReason.trim() === "" ? "Write why it was changed." : null,
    row.intendedUse === null ? "Say what it is intended for." : null,
    row.touchesEmissionOrSafety === null
      ? "Answer whether it touches emission- or safety-relevant functions."
      : null,
  ].filter((sentence) => sentence !== null);
}

/** draft → validating, by its calibrator; text and image are frozen from here on. @throws InvalidInputError naming what is missing */
export async function startValidating(ctx: Ctx, { revisionId }: { revisionId: string }): Promise<void> {
  await stepRevision(ctx, {
    action: "revision.validate",
    revisionId,
    from: ["draft"],
    doing: "start validating",
    event: "revision.validating",
    change: async (_tx, row) => {
      const missing = missingForValidating(row);
      if (missing.length > 0) throw new InvalidInputError("not_stated", missing.join(" "), { missing });
      const { imageSha256, changeReason, intendedUse, touchesEmissionOrSafety } = row;
      return {
        set: { state: "validating" },
        data: { imageSha256, changeReason, intendedUse, touchesEmissionOrSafety },
      };
    },
  });
}
