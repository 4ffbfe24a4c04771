import type { ChangeSet, CharacteristicChange } from "@/lib/calibration/changes/types";
import { nameSome } from "@/lib/format/name-some";
import { isNamed, knownChanges, noDescription } from "@/lib/gates/calibration/known-changes";
import { moveText, stepText } from "@/lib/gates/calibration/step-words";
import { largestMove, largestStep, shareBase, type TableStep } from "@/lib/gates/calibration/table-steps";
import type { GateEvidence } from "@/lib/gates/evidence";
import type { GateResult, StepLimitGate } from "@/lib/gates/plan";
import { counted, figure, gateResult, met, notMet, tooLittle, type Verdict } from "@/lib/gates/verdict";

/** Differences of decimal numbers are not exact: this share of a limit does not count as beyond it. */
const ROUNDING = 1e-9;

/** What one table shows against one limit: how much in the gate's measure and where, or why it can't be told. */
type Found = { change: CharacteristicChange; size: number; step: TableStep } | { unknown: string };

/**
 * Limits on the changed tables in the gate's scope: the largest step between neighbouring cells of the side after, of which one
 * changed at least, and the largest move of a cell. A size is the difference in the table's unit, or its share of the span of the
 * values before (of their own size where all are alike). Words have no size and are left out. What can't be told keeps the gate
 * at too little: a cell without a value, a table that only one description knows, of another shape, or with axis points that moved
 * (a move is told by cell, and the cells then hold at other places).
 */
export function stepLimitGate(gate: StepLimitGate, evidence: GateEvidence): GateResult {
  const unit = gate.measure === "share" ? " % of the span" : " in its own unit";
  const limits = [
    gate.maxNeighbourStep === null
      ? []
      : [`neighbouring cells step by at most ${figure(gate.maxNeighbourStep, 3)}${unit}`],
    gate.movedAtMost === null
      ? []
      : [
          `no cell moved by more than ${figure(gate.movedAtMost, 3)}${unit} against ${gate.against === "parent" ? "the parent" : "what stands"}`,
        ],
  ].flat();
  const title = `${gate.scope.length > 0 ? nameSome(gate.scope) : "Changed tables"}: ${limits.join("; ")}`;
  const known = knownChanges(evidence, gate.against);
  return gateResult(gate, title, "open" in known ? known.open : verdictOn(gate, known.changes));
}

function verdictOn(gate: StepLimitGate, changes: ChangeSet): Verdict {
  if (changes.identical) return met("The images hold the same bytes.");
  if (changes.readBy === "none") return noDescription();
  const scope = new Set(gate.scope);
  const tables = changes.characteristics.filter((change) => scope.size === 0 || isNamed(change, scope));
  const hidden = changes.notRead.filter(
    ({ name, sets = [] }) => scope.size === 0 || [name, ...sets].some((one) => scope.has(one)),
  );
  const unread =
    hidden.length > 0 && changes.uncoveredBytes > 0
      ? [`${nameSome(hidden.map(({ name }) => name))} could not be read and may have changed.`]
      : [];
  const parts = [
    ...(gate.maxNeighbourStep === null
      ? []
      : [
          hold(
            gate,
            tables.flatMap((change) => stepOf(gate, change)),
            gate.maxNeighbourStep,
            stepText,
          ),
        ]),
    ...(gate.movedAtMost === null
      ? []
      : [
          hold(
            gate,
            tables.flatMap((change) => moveOf(gate, change)),
            gate.movedAtMost,
            moveText,
          ),
        ]),
  ];
  const why = [...new Set([...parts.map((part) => part.why), ...unread])].filter(Boolean).join(" ");
  if (parts.some(({ state }) => state === "beyond"))
    return notMet(why, "Look at this cell; make a new revision.");
  if (unread.length > 0 || parts.some(({ state }) => state === "open"))
    return tooLittle(why, "Look at these tables yourself, and say in a waiver what you saw.");
  const words = tables.filter(({ changes }) => changes.some(({ after }) => typeof after === "string"));
  if (why !== "")
    return met(
      words.length > 0 ? `${why} Words have no size: ${nameSome(words.map(({ name }) => name))}.` : why,
    );
  return met(
    tables.length === 0
      ? `Nothing ${scope.size > 0 ? `of ${nameSome(gate.scope)}` : "described"} changed.`
      : `${counted(tables.length, "changed characteristic")} ${tables.length === 1 ? "has" : "have"} nothing to hold against this limit.`,
  );
}

function hold(
  gate: StepLimitGate,
  found: readonly Found[],
  limit: number,
  text: (change: CharacteristicChange, step: TableStep, measured: string) => string,
): { state: "inside" | "open" | "beyond"; why: string } {
  const told = found.filter((one) => "step" in one);
  const open = found.flatMap((one) => ("unknown" in one ? [one.unknown] : []));
  const worst = told.length > 0 ? told.reduce((a, b) => (b.size > a.size ? b : a)) : null;
  const measured = worst && gate.measure === "share" ? `, ${figure(worst.size)} % of the span` : "";
  const why = [
    ...(worst
      ? [
          `${text(worst.change, worst.step, measured)}; ${figure(limit, 3)}${gate.measure === "share" ? " %" : ""} is allowed.`,
        ]
      : []),
    ...open.slice(0, 2),
    ...(open.length > 2 ? [`So it is with ${open.length - 2} more.`] : []),
  ].join(" ");
  if (worst && worst.size > limit * (1 + ROUNDING)) return { state: "beyond", why };
  return { state: open.length > 0 ? "open" : "inside", why };
}

/** A change set that changes very much lists its largest changes only. */
function isUnlisted({ before, after }: CharacteristicChange): boolean {
  return before === null && after === null;
}

const unknown = ({ name }: CharacteristicChange, why: string): Found[] => [{ unknown: `${name} ${why}.` }];
const UNLISTED = "is not listed cell by cell: too many cells changed";

/** The largest step of a table, and why some of it can't be told; nothing for what has no neighbours. */
function stepOf(gate: StepLimitGate, change: CharacteristicChange): Found[] {
  if (isUnlisted(change)) return unknown(change, UNLISTED);
  const step = largestStep(change);
  const isHollow = change.after && change.after.axes.length > 0 && change.after.values.includes(null);
  return [
    ...(step ? [sized(gate, change, step)] : []),
    ...(isHollow ? unknown(change, "has cells without a value") : []),
  ];
}

/** The largest move of a cell, and why some of it can't be told; nothing for words. */
function moveOf(gate: StepLimitGate, change: CharacteristicChange): Found[] {
  const { before, after, changes, largestRise, largestFall } = change;
  if (isUnlisted(change)) return unknown(change, UNLISTED);
  if (!before || !after) return unknown(change, "is known to one description only");
  if (change.shapeChanged) return unknown(change, "has another number of cells than before");
  const move = largestMove(change);
  if (move && move.size > 0 && largestRise === null && largestFall === null)
    return unknown(change, "has another unit in each of the two descriptions");
  return [
    ...(move ? [sized(gate, change, move)] : []),
    ...(change.axisChanged && change.type !== "AXIS_PTS"
      ? unknown(change, "has axis points that moved, so its cells hold at other places")
      : []),
    ...(changes.some((cell) => cell.before === null || cell.after === null)
      ? unknown(change, "has changed cells without a value")
      : []),
    ...(changes.some(
      ({ before: from, after: to }) => from !== null && to !== null && typeof from !== typeof to,
    )
      ? unknown(change, "has changed cells that are a number on one side and a word on the other")
      : []),
  ];
}

function sized(gate: StepLimitGate, change: CharacteristicChange, step: TableStep): Found {
  if (gate.measure === "unit" || step.size === 0) return { change, size: step.size, step };
  const base = shareBase(change);
  return base === null
    ? {
        unknown: `${change.name} was ${change.before ? "0" : "not known"} before, which no share refers to; limit it in its own unit.`,
      }
    : { change, size: (100 * step.size) / base, step };
}
