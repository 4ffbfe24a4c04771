import type { Consequence, Note, RunResult, Span } from "@/lib/measure/types";

/** Codes that hide a span, for results of versions that stated no consequence. */
const MASKED_BEFORE = new Set(["wheel_spin", "clutch_slip", "gap"]);

/** Worst first: the order in which findings are told. */
export const CONSEQUENCES: readonly Consequence[] = ["refused", "masked", "warned"];

/** The consequence of a finding in the notes of a run; one without it (older versions) is told by its code. */
export function consequenceOf({ code, consequence }: Pick<Note, "code" | "consequence">): Consequence {
  return consequence ?? (MASKED_BEFORE.has(code) ? "masked" : "warned");
}

/** Every finding of a run, worst first, each with its consequence; in order of time within one consequence. */
export function findingsOf({
  usable,
  reasons,
  notes,
}: Pick<RunResult, "usable" | "reasons" | "notes">): (Note & { consequence: Consequence })[] {
  const refusing = usable ? [] : reasons.map((reason) => ({ ...reason, consequence: "refused" as const }));
  const others = notes.map((note) => ({ ...note, consequence: consequenceOf(note) }));
  const rank = (note: { consequence: Consequence }) => CONSEQUENCES.indexOf(note.consequence);
  const at = (note: Note) => note.from_s ?? Number.POSITIVE_INFINITY;
  return [...refusing, ...others].sort((a, b) => rank(a) - rank(b) || (at(a) === at(b) ? 0 : at(a) - at(b)));
}

/** The spans that some notes hide. A masked finding without a span hides none: it says what else was left out. */
export function maskedSpans(notes: readonly Note[]): Span[] {
  return notes.flatMap((note) =>
    consequenceOf(note) === "masked" && note.from_s !== undefined && note.to_s !== undefined
      ? [{ from_s: note.from_s, to_s: note.to_s }]
      : [],
  );
}

/** A result whose every finding states its consequence. */
export function withConsequences(result: RunResult): RunResult {
  return {
    ...result,
    reasons: result.reasons.map((reason) => ({ ...reason, consequence: "refused" })),
    notes: result.notes.map((note) => ({ ...note, consequence: consequenceOf(note) })),
  };
}
