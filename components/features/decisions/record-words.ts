export type RecordKind = "as_found" | "promote" | "hold" | "turn_down" | "roll_back";

/** Stands beside evidence that was no longer what counted. */
export const STALE_EVIDENCE =
  "Stale when it was decided: runs, their facts or the vehicle sheet had moved since this result was computed. Result and runs are those of the earlier input.";

/** What a record says in its title. */
export function recordTitle(kind: RecordKind, number: number, from: number | null): string {
  switch (kind) {
    case "as_found":
      return `R${number} adopted as found`;
    case "promote":
      return `R${number} stands`;
    case "hold":
      return `R${number} held for more runs`;
    case "turn_down":
      return `R${number} turned down`;
    case "roll_back":
      return `rolled back${from === null ? "" : ` from R${from}`} to R${number}`;
  }
}
