import { eq, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { decisions, workspaces } from "@/db/tables";
import { MEANING } from "@/lib/services/decisions/schema";
import type { RoadSide } from "@/tests/support/road-side";

/** A decision of the lead that rests on a run, or names it as left out, written straight into its table. @returns its record number */
export async function citeRun(
  db: Queryable,
  side: RoadSide,
  runId: string,
  { leftOut = null, kind = "turn_down" }: { leftOut?: string | null; kind?: "hold" | "turn_down" } = {},
): Promise<number> {
  const { workspaceId, programmeId } = side;
  const [{ next }] = await db
    .update(workspaces)
    .set({ nextRecordNumber: sql`${workspaces.nextRecordNumber} + 1` })
    .where(eq(workspaces.id, workspaceId))
    .returning({ next: workspaces.nextRecordNumber });
  const recordNumber = next - 1;
  await db.insert(decisions).values({
    ...{ workspaceId, programmeId, recordNumber, revisionId: side.r2, kind },
    reason: "torque is lost below 3,000 per minute",
    meaning: MEANING[kind],
    deciderId: side.lead.userId,
    deciderName: side.lead.userName,
    authorId: side.calibrator.userId,
    reauthMethod: "passphrase",
    evidence: {
      comparisonId: null,
      comparisonInputSha256: null,
      resultSha256: null,
      analysisVersion: null,
      sheetVersion: null,
      gatePlanVersion: null,
      gates: [],
      runs: [
        {
          ...{ runId, number: 1, logSha256: "0".repeat(64), side: "B", usable: true },
          ...{ testerName: side.tester.userName, leftOut },
        },
      ],
      revision: {
        ...{ number: 2, title: "candidate", parentNumber: 1, imageFileName: "image.hex", imageBytes: 4 },
        ...{ changeReason: "a reason", intendedUse: "closed_course", touchesEmissionOrSafety: false },
      },
      fromNumber: 1,
      leadsRequired: 1,
      imageSha256: "0".repeat(64),
      standingImageSha256: null,
    },
    recordSha256: "0".repeat(64),
  });
  return recordNumber;
}
