"use client";

import { SegmentedControl } from "@/components/ui/action/segmented-control";
import { Select } from "@/components/ui/form/select";
import { TextInput } from "@/components/ui/form/text-input";
import { LEGS, RUN_KINDS } from "@/lib/services/runs/schema";

/** What the tester says of one file, as it stands in the fields. */
export interface RunFieldValues {
  revisionId: string;
  driveOrder: string;
  leg: (typeof LEGS)[number];
  kind: (typeof RUN_KINDS)[number];
  gear: string;
}

const KIND_WORDS: Record<RunFieldValues["kind"], string> = {
  pull: "pull with coast-down",
  "coast-down": "coast-down alone",
  sprint: "sprint",
};
const LEG_OPTIONS = LEGS.map((leg) => ({ value: leg, label: leg.toUpperCase() }));

export interface RunFieldsProps {
  /** Names the row for assistive technology. */
  fileName: string;
  values: RunFieldValues;
  revisions: readonly { id: string; number: number; title: string }[];
  gears: number;
  /** What the order card has at this place, where the row says otherwise. */
  cardSays: string | null;
  onChange: (values: Partial<RunFieldValues>) => void;
}

/** Prefilled from the order card; pick lists and steppers, so that hardly anything is typed at the kerb. */
export function RunFields({ fileName, values, revisions, gears, cardSays, onChange }: RunFieldsProps) {
  return (
    <fieldset className="roadside flex flex-col gap-3">
      <legend className="sr-only">What {fileName} is</legend>
      <div className="grid grid-cols-2 gap-3 sm:grid-cols-4">
        <Select
          label="In the car"
          value={values.revisionId}
          onChange={(event) => onChange({ revisionId: event.target.value })}
          options={revisions.map(({ id, number, title }) => ({ value: id, label: `R${number} ${title}` }))}
          fieldClassName="col-span-2"
        />
        <TextInput
          label="Place in the order"
          mono
          inputMode="numeric"
          value={values.driveOrder}
          onChange={(event) => onChange({ driveOrder: event.target.value })}
        />
        <Select
          label="Gear"
          value={values.gear}
          emptyLabel="not known"
          onChange={(event) => onChange({ gear: event.target.value })}
          options={Array.from({ length: gears }, (_, i) => ({ value: String(i + 1), label: String(i + 1) }))}
        />
      </div>
      <div className="flex flex-wrap items-end gap-3">
        <SegmentedControl
          legend={`Leg of ${fileName}`}
          options={LEG_OPTIONS}
          value={values.leg}
          onChange={(leg) => onChange({ leg })}
        />
        <Select
          label="Driven as"
          value={values.kind}
          onChange={(event) => onChange({ kind: event.target.value as RunFieldValues["kind"] })}
          options={RUN_KINDS.map((kind) => ({ value: kind, label: KIND_WORDS[kind] }))}
          fieldClassName="min-w-52 flex-1"
        />
      </div>
      {cardSays && <p className="text-15 text-thin">{cardSays}</p>}
    </fieldset>
  );
}
