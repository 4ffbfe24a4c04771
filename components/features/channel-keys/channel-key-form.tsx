"use client";

import { useState, useTransition } from "react";
import { appliedWords, type KeyAnswer } from "@/components/features/channel-keys/applied-words";
import { ColumnRow, type StatedColumn } from "@/components/features/channel-keys/column-row";
import { LayoutFields } from "@/components/features/channel-keys/layout-fields";
import { RowsAsParsed } from "@/components/features/channel-keys/rows-as-parsed";
import { UnitLists } from "@/components/features/channel-keys/unit-lists";
import { type KeyPreview, usePreview } from "@/components/features/channel-keys/use-preview";
import { Button } from "@/components/ui/action/button";
import { Checkbox } from "@/components/ui/form/checkbox";
import { TextInput } from "@/components/ui/form/text-input";
import { Card } from "@/components/ui/layout/card";
import { Notice } from "@/components/ui/status/notice";
import { previewWords } from "@/lib/logs/preview/preview-words";
import { type RequiringKind, requiredChannels } from "@/lib/logs/preview/required-channels";
import type { SaveChannelKey, StatedKey } from "@/lib/services/channel-keys/schema";

export interface ChannelKeyFormProps {
  runId: string;
  kind: RequiringKind;
  /** The vehicle sheet tells engine speed from road speed, so that a pull needs no column for it. */
  engineSpeedFromSheet: boolean;
  initial: KeyPreview;
  initialKey: StatedKey;
  initialName: string;
  /** 0: no key was saved for this header yet. */
  newestVersion: number;
  action: (input: SaveChannelKey) => Promise<KeyAnswer>;
  /** Told what came of saving. */
  onDone: (words: string) => void;
}

/** Says what every column of a log is, looks at what comes of it, and keeps it for all logs with this header. */
export function ChannelKeyForm(props: ChannelKeyFormProps) {
  const { runId, kind, engineSpeedFromSheet, newestVersion, action, onDone } = props;
  const [stated, setStated] = useState<StatedKey>(props.initialKey);
  const [name, setName] = useState(props.initialName);
  const [everyRun, setEveryRun] = useState(true);
  const [answer, setAnswer] = useState<KeyAnswer | null>(null);
  const [isSaving, start] = useTransition();
  const { preview, missing, error, isReading } = usePreview(runId, stated, props.initial);
  const required = new Set(requiredChannels(kind, engineSpeedFromSheet).flatMap(({ anyOf }) => anyOf));
  const { leftOut, inDoubt } = previewWords(preview);
  const isText = preview.format === null || preview.format === "delimited";
  const change = (changed: Partial<StatedKey>) => setStated((key) => ({ ...key, ...changed }));
  const changeColumn = (title: string, column: StatedColumn) =>
    setStated((key) => ({ ...key, columns: { ...key.columns, [title]: column } }));
  const save = () =>
    start(async () => {
      const came = await action({ runId, name, basedOnVersion: newestVersion, key: stated, everyRun });
      setAnswer(came);
      if (came.ok) onDone(`The key is saved. ${appliedWords(came.value)}`);
    });
  const blocked = isReading ? "The log is being read with what you changed." : (error ?? missing);
  return (
    <div className="flex flex-col gap-6">
      {isText && (
        <Card title="How the file is laid out" id="layout">
          <LayoutFields stated={stated} preview={preview} onChange={change} />
        </Card>
      )}
      <div aria-live="polite" className="flex flex-col gap-3">
        {error && <Notice tone="problem">{error}</Notice>}
        {preview.refusal && (
          <Notice tone="problem" title="The log can’t be read like this">
            {preview.refusal.message}
          </Notice>
        )}
        {!preview.refusal && inDoubt.length > 0 && (
          <Notice tone="caution" title="In doubt">
            <ul className="flex flex-col gap-1">
              {inDoubt.map((sentence) => (
                <li key={sentence}>{sentence}</li>
              ))}
            </ul>
          </Notice>
        )}
      </div>
      <div className="grid items-start gap-6 lg:grid-cols-2">
        <RowsAsParsed preview={preview} />
        <Card
          title="Columns"
          description="Every column is a channel or left out. The figures are least, median and most."
          id="columns"
        >
          <UnitLists />
          <ul aria-label="Columns" className="flex flex-col" aria-busy={isReading}>
            {preview.columns.map((column, index) => (
              <ColumnRow
                // biome-ignore lint/suspicious/noArrayIndexKey: titles may repeat; the place in the file is the identity
                key={`${index} ${column.title}`}
                column={column}
                stated={stated.columns?.[column.title]}
                required={required}
                onChange={(value) => changeColumn(column.title, value)}
              />
            ))}
          </ul>
          <p className="border-line border-t pt-3 text-15">
            {leftOut.length === 0 ? "No column is left out." : `Left out: ${leftOut.join(", ")}.`}
          </p>
        </Card>
      </div>
      <Card title="Keep it as a channel key" tone="well" id="save">
        <div className="flex flex-col gap-3">
          <TextInput
            label="Name of the logger"
            hint="E.g. Black box. The next log with this header needs one tap."
            required
            value={name}
            maxLength={60}
            error={answer?.fields?.name?.[0]}
            onChange={(event) => setName(event.target.value)}
          />
          <Checkbox
            label="Use it for every run of this programme with the same header"
            hint="Runs that a final decision rests on stay as they are."
            checked={everyRun}
            onChange={(event) => setEveryRun(event.target.checked)}
          />
          <Button
            look="filled"
            size="roadside"
            className="w-full sm:w-auto sm:self-start"
            disabled={isSaving}
            blockedBecause={blocked}
            onClick={save}
          >
            {isSaving ? "Saving …" : `Save version ${newestVersion + 1} and judge again`}
          </Button>
          {answer && !answer.ok && (
            <Notice tone="problem" live>
              {answer.message}
            </Notice>
          )}
        </div>
      </Card>
    </div>
  );
}
