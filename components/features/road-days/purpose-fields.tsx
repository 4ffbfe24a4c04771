import { Checkbox } from "@/components/ui/form/checkbox";
import { Select } from "@/components/ui/form/select";
import { MOST_TWINS } from "@/lib/compare/plan/order-card";
import type { RoadDayPurpose } from "@/lib/services/road-days/schema";

export interface PurposeFieldsProps {
  /** Revisions that may be driven, newest first. */
  revisions: readonly { id: string; number: number; title: string }[];
  value: RoadDayPurpose;
  onChange: (value: RoadDayPurpose) => void;
}

const TWINS = Array.from({ length: MOST_TWINS }, (_, i) => String(i + 1));

/** What the day is opened for: two images, or one against itself. Fixed once the day is open. */
export function PurposeFields({ revisions, value, onChange }: PurposeFieldsProps) {
  const isNullTest = Boolean(value.nullTestRevisionId);
  return (
    <fieldset className="grid gap-4 sm:grid-cols-2">
      <legend className="mb-2 font-head font-semibold text-17">What the day is for</legend>
      <Select
        label="Driven on this day"
        value={value.nullTestRevisionId ?? ""}
        emptyLabel="Two images, to compare them"
        onChange={(event) => onChange({ ...value, nullTestRevisionId: event.target.value || null })}
        options={revisions.map(({ id, number, title }) => ({
          value: id,
          label: `Null test: R${number} ${title} against itself`,
        }))}
        hint="A null test must claim nothing: it shows the scatter of your method. Can't be changed later."
      />
      <Select
        label="Twins a side"
        value={value.plannedTwins ? String(value.plannedTwins) : ""}
        emptyLabel="As the gate plan asks"
        onChange={(event) =>
          onChange({ ...value, plannedTwins: event.target.value ? Number(event.target.value) : null })
        }
        options={TWINS.map((twins) => ({ value: twins, label: twins }))}
        hint="The order card starts with this; it can be changed there."
      />
      {isNullTest && (
        <Checkbox
          label="Write the same image anew wherever the letter changes"
          hint="Then the scatter also holds what a write and the settling after it do."
          checked={value.nullTestRewrites ?? false}
          onChange={(event) => onChange({ ...value, nullTestRewrites: event.target.checked })}
          className="sm:col-span-2"
        />
      )}
    </fieldset>
  );
}
