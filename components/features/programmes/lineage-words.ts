import { dateTimeText } from "@/components/ui/data/date-time";

/** The states that the drawing of a lineage knows. */
export type DrawnState =
  | "draft"
  | "validating"
  | "in_review"
  | "stands"
  | "superseded"
  | "turned_down"
  | "rolled_back"
  | "withdrawn"
  | "set_aside"
  | "barred";

/** The states that a revision can be in. */
type RevisionState = Exclude<DrawnState, "stands" | "set_aside" | "barred"> | "promoted";

const day = (at: Date) => dateTimeText(at, "UTC", "day");

/** How a revision is drawn: set aside and barred win over the state that it had. */
export function drawnState(revision: {
  state: RevisionState;
  setAsideAt: Date | null;
  barredAt: Date | null;
}): DrawnState {
  if (revision.barredAt) return "barred";
  if (revision.setAsideAt) return "set_aside";
  return revision.state === "promoted" ? "stands" : revision.state;
}

/** "stands since 12 Nov 2026", "stood 3 Oct 2026 – 12 Nov 2026"; undefined where the plain state says it. */
export function statePhrase(revision: {
  state: RevisionState;
  stoodFrom: Date | null;
  stoodUntil: Date | null;
}): string | undefined {
  const { state, stoodFrom, stoodUntil } = revision;
  if (!stoodFrom) return undefined;
  if (state === "promoted") return `stands since ${day(stoodFrom)}`;
  if (!stoodUntil) return undefined;
  const [from, until] = [day(stoodFrom), day(stoodUntil)];
  const stood = from === until ? `stood on ${from}` : `stood ${from} – ${until}`;
  return state === "rolled_back" ? `${stood}, rolled back` : stood;
}

export const runsText = (runs: number): string =>
  runs === 0 ? "no runs" : runs === 1 ? "1 run" : `${runs} runs`;
