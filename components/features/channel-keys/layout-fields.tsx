"use client";

import { Select } from "@/components/ui/form/select";
import { TextInput } from "@/components/ui/form/text-input";
import type { LogPreview } from "@/lib/logs/preview/preview-log";
import { TIME_FORMS, type TimeForm } from "@/lib/logs/times/time-forms";
import { KEY_DELIMITERS, KEY_ENCODINGS, type StatedKey } from "@/lib/services/channel-keys/schema";

const DELIMITER_WORDS: Record<string, string> = { ",": "comma", ";": "semicolon", "\t": "tab", "|": "bar" };
const DECIMAL_WORDS: Record<string, string> = { ".": "point", ",": "comma" };
const TIME_WORDS: Record<TimeForm, string> = {
  s: "seconds",
  ms: "milliseconds",
  us: "microseconds",
  ns: "nanoseconds",
  min: "minutes",
  h: "hours",
  clock: "clock, e.g. 14:03:07.2",
  iso: "date and clock",
  epoch_s: "seconds since 1970",
  epoch_ms: "milliseconds since 1970",
  epoch_us: "microseconds since 1970",
  epoch_ns: "nanoseconds since 1970",
};
const options = <T extends string>(values: readonly T[], words: (value: T) => string) =>
  values.map((value) => ({ value, label: words(value) }));
const as = <T extends string>(text: string) => (text === "" ? undefined : (text as T));

export interface LayoutFieldsProps {
  stated: StatedKey;
  preview: LogPreview;
  onChange: (changed: Partial<StatedKey>) => void;
}

/** How the file is laid out: each is found from the file, and each can be said instead. */
export function LayoutFields({ stated, preview, onChange }: LayoutFieldsProps) {
  const { layout, time, columns } = preview;
  const found = (text: string | undefined) => `found: ${text ?? "in doubt"}`;
  const titles = [...new Set(columns.map(({ title }) => title))];
  return (
    <fieldset className="grid grid-cols-2 gap-3 sm:grid-cols-3 lg:grid-cols-4">
      <legend className="sr-only">How the file is laid out</legend>
      <Select
        label="Delimiter"
        value={stated.delimiter ?? ""}
        emptyLabel={found(layout ? (DELIMITER_WORDS[layout.delimiter] ?? layout.delimiter) : undefined)}
        options={options(KEY_DELIMITERS, (value) => DELIMITER_WORDS[value] ?? value)}
        onChange={(event) => onChange({ delimiter: as(event.target.value) })}
      />
      <Select
        label="Decimal mark"
        value={stated.decimal ?? ""}
        emptyLabel={found(
          layout && preview.refusal?.code !== "ambiguous_decimal" ? DECIMAL_WORDS[layout.decimal] : undefined,
        )}
        options={options([".", ","], (value) => DECIMAL_WORDS[value] ?? value)}
        onChange={(event) => onChange({ decimal: as(event.target.value) })}
      />
      <TextInput
        label="Header row"
        mono
        inputMode="numeric"
        placeholder={layout ? `found: ${layout.header_rows || "none"}` : ""}
        value={stated.header_rows === undefined ? "" : String(stated.header_rows)}
        onChange={(event) => {
          const digits = event.target.value.replaceAll(/\D/g, "").slice(0, 3);
          onChange({ header_rows: digits === "" ? undefined : Math.min(200, Number(digits)) });
        }}
      />
      <Select
        label="Unit row below it"
        value={stated.unit_row === undefined ? "" : stated.unit_row ? "yes" : "no"}
        emptyLabel={found(layout ? (layout.unit_row ? "yes" : "no") : undefined)}
        options={options(["yes", "no"], (value) => value)}
        onChange={({ target }) =>
          onChange({ unit_row: target.value === "" ? undefined : target.value === "yes" })
        }
      />
      <Select
        label="Encoding"
        value={stated.encoding ?? ""}
        emptyLabel={found(layout?.encoding)}
        options={options(KEY_ENCODINGS, (value) => value)}
        onChange={(event) => onChange({ encoding: as(event.target.value) })}
      />
      <Select
        label="Time column"
        required
        value={stated.time?.column ?? ""}
        emptyLabel={found(time?.column)}
        options={options(titles, (title) => title || "(no title)").filter(({ value }) => value !== "")}
        onChange={({ target }) =>
          onChange({ time: target.value === "" ? undefined : { ...stated.time, column: target.value } })
        }
      />
      <Select
        label="Form of the time"
        value={stated.time?.form ?? ""}
        emptyLabel={found(TIME_WORDS[time?.form as TimeForm])}
        options={options(TIME_FORMS, (form) => TIME_WORDS[form])}
        onChange={({ target }) => {
          const column = stated.time?.column ?? time?.column ?? titles[0];
          if (column !== undefined) onChange({ time: { column, form: as(target.value) } });
        }}
      />
    </fieldset>
  );
}
