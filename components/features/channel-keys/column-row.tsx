"use client";

import { SparkLine } from "@/components/features/channel-keys/spark-line";
import { unitListId } from "@/components/features/channel-keys/unit-lists";
import { numberText } from "@/components/ui/data/number-text";
import { Select } from "@/components/ui/form/select";
import { TextInput } from "@/components/ui/form/text-input";
import { CHANNEL_UNITS } from "@/lib/logs/channels/channel-names";
import { channelWords } from "@/lib/logs/channels/channel-words";
import type { PreviewColumn } from "@/lib/logs/preview/preview-columns";
import { KNOWN_CHANNELS, type KnownChannel } from "@/lib/logs/types";

/** What a person says of one column. */
export interface StatedColumn {
  channel: string | null;
  unit?: string;
}

const OWN = "own name";
const CHANNELS = KNOWN_CHANNELS.filter((channel) => channel !== "time");
const isKnown = (channel: string): channel is KnownChannel =>
  (KNOWN_CHANNELS as readonly string[]).includes(channel);

function rangeText({ min, median, max, unit }: PreviewColumn): string {
  if (min === null || max === null) return "no values";
  const decimals = (value: number) =>
    Number.isInteger(value) || Math.abs(value) >= 1000 ? 0 : Math.abs(value) >= 10 ? 1 : 3;
  const text = (value: number | null) => numberText(value, { decimals: decimals(value ?? 0) });
  return `${text(min)} · ${text(median)} · ${text(max)} ${unit}`;
}

export interface ColumnRowProps {
  column: PreviewColumn;
  stated: StatedColumn | undefined;
  /** Channels of which the run needs one; they are marked in the list. */
  required: ReadonlySet<string>;
  onChange: (stated: StatedColumn) => void;
}

/** One column of the file: what it holds, and which channel in which unit that is. */
export function ColumnRow({ column, stated, required, onChange }: ColumnRowProps) {
  const { title, role, samples, unitFound, plausible } = column;
  const shown = stated ? stated.channel : column.channel;
  const selected = shown === null ? "" : isKnown(shown) ? shown : OWN;
  const dimension = selected !== "" && isKnown(selected) ? CHANNEL_UNITS[selected].dimension : null;
  const listId = dimension === null ? undefined : unitListId(dimension);
  const state =
    selected === "" ? "left out" : role === "free" && selected !== OWN ? "not understood yet" : null;
  return (
    <li className="flex flex-col gap-3 border-line border-t py-4 first:border-t-0" aria-label={title}>
      <div className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1">
        <span className="break-all font-semibold">{title || "(no title)"}</span>
        <SparkLine values={column.spark} />
      </div>
      <p className="flex flex-wrap gap-x-3 text-13 text-ink2">
        <span>unit found: {unitFound ?? "none"}</span>
        <span className="tabular break-all">{samples.join(" · ")}</span>
        {role !== "time" && role !== "text" && (
          <span className="tabular">
            <span className="font-sans">least, median, most: </span>
            {rangeText(column)}
          </span>
        )}
      </p>
      {role === "time" && <p className="text-15">The time column; it is chosen above.</p>}
      {role === "text" && <p className="text-15">Left out: no cell of it is a number.</p>}
      {(role === "channel" || role === "free" || role === "unread") && (
        <div className="grid grid-cols-1 gap-3 sm:grid-cols-2">
          <Select
            label={`Channel of ${title || "this column"}`}
            value={selected}
            emptyLabel="left out"
            options={[
              ...CHANNELS.map((channel) => ({
                value: channel,
                label: `${channelWords(channel)}${required.has(channel) ? " (needed)" : ""}`,
              })),
              { value: OWN, label: "another, under its own name" },
            ]}
            onChange={({ target }) =>
              onChange({
                ...stated,
                channel:
                  target.value === ""
                    ? null
                    : target.value === OWN
                      ? title.slice(0, 60) || "channel"
                      : target.value,
              })
            }
          />
          {selected === OWN && (
            <TextInput
              label={`Name of ${title || "this column"}`}
              value={shown ?? ""}
              maxLength={60}
              onChange={({ target }) => onChange({ ...stated, channel: target.value })}
            />
          )}
          {selected !== "" && selected !== OWN && (
            <TextInput
              label={`Unit of ${title || "this column"}`}
              list={listId}
              placeholder={unitFound === null ? "not stated" : `found: ${unitFound}`}
              value={stated?.unit ?? ""}
              maxLength={20}
              autoCapitalize="off"
              onChange={({ target }) => {
                const unit = target.value;
                onChange({ channel: shown, ...(unit !== "" && { unit }) });
              }}
            />
          )}
        </div>
      )}
      {state && <p className="text-13 text-ink2">{state}</p>}
      {plausible && (
        <p className={plausible.looksRight ? "text-13" : "font-medium text-13 text-thin"}>
          {plausible.sentence}
        </p>
      )}
    </li>
  );
}
