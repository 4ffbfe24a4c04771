import { changeGrid } from "@/components/features/change-sets/detail/change-grid";
import { LIMIT_MARKS } from "@/components/features/change-sets/words/change-words";
import { differenceText, valueText } from "@/components/features/change-sets/words/figure-text";
import type { CharacteristicChange } from "@/lib/calibration/changes/types";

interface BeforeAfterProps {
  before: string;
  after: string;
  unit?: string;
  /** Signed difference; null where there is none to tell. */
  difference?: string | null;
  note?: string | null;
}

/** Two values side by side, the reference left. */
function BeforeAfter({ before, after, unit = "", difference = null, note }: BeforeAfterProps) {
  const withUnit = (text: string) => (
    <>
      {text}
      {unit && <span className="text-15 text-ink2">{`\u202f${unit}`}</span>}
    </>
  );
  return (
    <dl className="flex flex-wrap items-baseline gap-x-8 gap-y-3">
      <div>
        <dt className="text-13 text-ink2">Before</dt>
        <dd className="tabular break-words text-20">{withUnit(before)}</dd>
      </div>
      <div>
        <dt className="text-13 text-ink2">After</dt>
        <dd className="tabular break-words font-semibold text-20">{withUnit(after)}</dd>
      </div>
      {difference !== null && (
        <div>
          <dt className="text-13 text-ink2">After − before</dt>
          <dd className="tabular text-20">{withUnit(difference)}</dd>
        </div>
      )}
      {note && <div className="basis-full text-15">{note}</div>}
    </dl>
  );
}

/** One value: before → after, with the difference where both are numbers. */
export function ValueChange({ change }: { change: CharacteristicChange }) {
  const grid = changeGrid(change);
  const digits = grid?.digits ?? change.decimals;
  const [before, after] = [change.before?.values[0], change.after?.values[0]];
  const [cell] = change.changes;
  const limit = cell ? LIMIT_MARKS[cell.limit] : null;
  return (
    <BeforeAfter
      before={change.before ? valueText(before, digits) : "not there"}
      after={change.after ? valueText(after, digits) : "not there"}
      unit={change.unit}
      difference={differenceText(before, after, digits)}
      note={limit && `${limit.glyph} The new value is ${limit.words}.`}
    />
  );
}

/** A text of the calibration, whole on both sides. */
export function TextChange({ change }: { change: CharacteristicChange }) {
  const text = (side: CharacteristicChange["before"]) => (side ? `“${side.characters ?? ""}”` : "not there");
  return <BeforeAfter before={text(change.before)} after={text(change.after)} />;
}
