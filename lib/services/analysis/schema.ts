import type { ResultMoves } from "@/lib/compare/result-moves";
import type { GateState } from "@/lib/gates/plan";
import type { CampaignSettings } from "@/lib/measure/types";

/** A gate whose state differs between the two computations, under the newest gate plan. */
export interface GateMove {
  id: string;
  title: string;
  before: GateState;
  after: GateState;
}

/** One comparison that was computed under an older version. */
export interface ComparisonMoves {
  comparisonId: string;
  labels: { a: string; b: string };
  settings: CampaignSettings;
  isNullTest: boolean;
  oldVersion: string;
  /** `other input`: runs, settings or sheet have changed since, so what the version alone moves can't be told. */
  state: "told" | "being computed" | "other input";
  moves: ResultMoves | null;
  /** Null where no gate rests on the comparison. */
  gates: GateMove[] | null;
}
