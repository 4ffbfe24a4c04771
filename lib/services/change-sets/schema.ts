import { z } from "zod";
import type { RelevanceMark } from "@/lib/calibration/changes/relevance";
import type { ChangeSet } from "@/lib/calibration/changes/types";
import type { AxisLink, Coverage } from "@/lib/calibration/coverage/types";
import type { RegionResult } from "@/lib/calibration/image/checksum-regions";
import type { ImageReading } from "@/lib/calibration/values/types";
import type { DescriptionSummary } from "@/lib/services/descriptions/schema";

/** A description as pages show it. */
export interface ShownDescription {
  id: string;
  fileNames: string[];
  state: "reading" | "read" | "refused";
  /** Why it was refused, in a sentence. */
  failure: string | null;
  summary: DescriptionSummary | null;
}

/** A quantity that moves along an axis of something changed, and which channel of the logs it is. */
export interface ShownQuantity {
  /** Input quantity of the description, or `NAME/x` for an axis without one. */
  quantity: string;
  /** What it is in words, as far as its name says; empty where that is not known. */
  text: string;
  unit: string;
  /** The link in use; null where none is known. `by` says whether a person chose it. */
  link: AxisLink | null;
  /** Likely ones, the best first; empty until logs were read for coverage. */
  suggestions: AxisLink[];
}

/** Who is compared with whom. */
export interface ShownRevision {
  id: string;
  number: number;
  title: string;
}

/** Everything that pages show of what a revision changes. */
export interface RevisionChangesView {
  revision: ShownRevision & { programmeId: string };
  /** Null when there is nothing to compare with. */
  against: (ShownRevision & { stands: boolean; isParent: boolean }) | null;
  /** What else it can be compared with, newest first; a reader sees released ones only. */
  choices: ShownRevision[];
  /** not_asked: nobody has had this pair worked out yet; askForChangeSet does. */
  state: "ready" | "computing" | "failed" | "not_asked" | "nothing_to_compare";
  failure: string | null;
  changeSetId: string | null;
  /** Stored values of declared checksums are not counted as bytes that nobody described, as at the gates. */
  changes: ChangeSet | null;
  /** Bytes of such stored values that differ. */
  checksumBytes: number;
  coverage: {
    /**
     * ready: for what counts now. computing: `result` may hold the one before. no_description: axes are not known. not_asked: nobody
     * has had it worked out for what counts now; askForChangeSet does.
     */
    state: "ready" | "computing" | "failed" | "no_runs" | "no_description" | "not_asked";
    failure: string | null;
    result: Coverage | null;
    /** `result` belongs to earlier runs or links. */
    moved: boolean;
  };
  /** Digests of changes and ranges that this person has looked at, as far as they are in this change set. */
  lookedAt: string[];
  marks: RelevanceMark[];
  /** The revision's declaration says no, but something marked is touched: a sentence. */
  contradiction: string | null;
  /** Descriptions of the two sides; null where a side has none. */
  descriptions: { before: ShownDescription | null; after: ShownDescription | null };
  /** Whether the stored image still has its fingerprint; null until checked. */
  fingerprintHolds: boolean | null;
  /** The declared checksum regions in this revision's image; null until checked, [] when none is declared. */
  integrity: RegionResult[] | null;
  /** Whether this revision's image and description belong together; null without a reading. */
  epk: ImageReading["epk"] | null;
  inputQuantities: ShownQuantity[];
}

/** What a page polls while it waits. */
export interface ChangeSetState {
  state: RevisionChangesView["state"];
  coverage: RevisionChangesView["coverage"]["state"];
}

export const valuesFormat = z.enum(["cdfx", "csv"], "Choose cdfx or csv as the format.");

/** Largest values file that a revision is held against, in bytes. */
export const LARGEST_VALUES_FILE_BYTES = 16_000_000;
/** Differences, and names of each kind, that the answer lists; more are counted. */
export const MOST_LISTED_VALUES = 500;

export const askForChangeSetSchema = z.strictObject({ revisionId: z.uuid(), againstId: z.uuid() });

const sha256 = z.string().regex(/^[0-9a-f]{64}$/);

export const setLookedAtSchema = z.strictObject({
  revisionId: z.uuid(),
  changeSetId: z.uuid(),
  /** Digests of changes or uncovered ranges of that change set. */
  digests: z.array(sha256).min(1).max(5000),
  looked: z.boolean(),
});
export type SetLookedAt = z.infer<typeof setLookedAtSchema>;
