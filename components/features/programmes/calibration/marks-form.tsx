"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { Plus, Trash2 } from "lucide-react";
import { useId, useState } from "react";
import { type FieldErrors, useFieldArray, useForm } from "react-hook-form";
import { z } from "zod";
import { RELEVANCE_WORDS, SET_WORDS } from "@/components/features/programmes/calibration/mark-words";
import {
  SaveVersion,
  useSaveVersion,
  type VersionAnswer,
} from "@/components/features/programmes/save-version";
import { choices } from "@/components/features/programmes/sheet-words";
import { Button } from "@/components/ui/action/button";
import { Select } from "@/components/ui/form/select";
import { TextInput } from "@/components/ui/form/text-input";
import type { RelevanceMark } from "@/lib/calibration/changes/relevance";
import { relevanceMarkSchema } from "@/lib/services/calibration-settings/schema";

export interface MarksFormProps {
  programmeId: string;
  version: number;
  marks: readonly RelevanceMark[];
  /** Functions and groups that the programme's descriptions know. */
  known: readonly string[];
  blockedBecause: string | null;
  action: (input: {
    programmeId: string;
    basedOnVersion: number;
    marks: RelevanceMark[];
  }) => Promise<VersionAnswer>;
}

const schema = z.object({ marks: z.array(relevanceMarkSchema).max(500, "At most 500 marks.") });

/** The newest marks, to be changed into the next version: functions are picked, characteristics typed. */
export function MarksForm({ programmeId, version, marks, known, blockedBecause, action }: MarksFormProps) {
  const { control, register, handleSubmit, watch, formState } = useForm<{ marks: RelevanceMark[] }>({
    resolver: zodResolver(schema),
    defaultValues: { marks: [...marks] },
  });
  const { fields, append, remove } = useFieldArray({ control, name: "marks", keyName: "key" });
  const { save, ...state } = useSaveVersion(version);
  const marked = new Set(watch("marks").flatMap(({ set, name }) => (set === "function" ? [name] : [])));
  const add = (set: RelevanceMark["set"], name: string) =>
    append({ set, name, relevance: "emission", note: "" });
  const send = handleSubmit((values) =>
    save(() => action({ programmeId, basedOnVersion: version, marks: values.marks })),
  );
  return (
    <form onSubmit={send} noValidate className="flex flex-col gap-6">
      {fields.length === 0 && (
        <p className="text-15">Nothing is marked yet. Add the functions that emissions or safety rest on.</p>
      )}
      <ul>
        {fields.map((mark, index) => (
          <li
            key={mark.key}
            className="grid gap-x-4 gap-y-2 border-line border-t py-3 first:border-t-0 md:grid-cols-[minmax(0,1fr)_9rem_minmax(0,1fr)_2.75rem] md:items-end"
          >
            <p className="min-w-0 self-center break-words md:pt-6">
              <span className="font-medium text-15">{mark.name}</span>{" "}
              <span className="text-13 text-ink2">{SET_WORDS[mark.set]}</span>
            </p>
            <Select
              label="Relevant for"
              aria-label={`${mark.name} is relevant for`}
              options={choices(RELEVANCE_WORDS)}
              {...register(`marks.${index}.relevance`)}
            />
            <TextInput
              label="Note"
              aria-label={`Note on ${mark.name}`}
              error={formState.errors.marks?.[index]?.note?.message}
              {...register(`marks.${index}.note`)}
            />
            <button
              type="button"
              onClick={() => remove(index)}
              aria-label={`Take out: ${mark.name}`}
              className="inline-flex size-11 items-center justify-center rounded text-ink2 hover:bg-sunk hover:text-ink"
            >
              <Trash2 aria-hidden size={18} />
            </button>
          </li>
        ))}
      </ul>
      <AddMark known={known.filter((name) => !marked.has(name))} onAdd={add} />
      <SaveVersion
        version={version}
        blockedBecause={blockedBecause}
        {...state}
        problem={wrongText(formState.errors.marks) ?? state.problem}
      />
    </form>
  );
}

/** Why nothing was sent; null where nothing is wrong. A name has no field of its own that could say it. */
function wrongText(errors: FieldErrors<{ marks: RelevanceMark[] }>["marks"]): string | null {
  if (!errors) return null;
  const ofNames = Array.isArray(errors) ? errors.flatMap((error) => error?.name?.message ?? []) : [];
  return (
    errors.root?.message ?? errors.message ?? ofNames[0] ?? "Some fields need another look: each says why."
  );
}

function AddMark({
  known,
  onAdd,
}: {
  known: readonly string[];
  onAdd: (set: RelevanceMark["set"], name: string) => void;
}) {
  const listId = useId();
  const [set, setSet] = useState("");
  const [name, setName] = useState("");
  const typed = (kind: RelevanceMark["set"]) => () => {
    if (name.trim() === "") return;
    onAdd(kind, name.trim());
    setName("");
  };
  return (
    <div className="flex flex-col gap-3 border-line border-t pt-4">
      {known.length > 0 && (
        <div className="flex flex-wrap items-end gap-2">
          <Select
            label="Function or group of the description"
            emptyLabel="Choose one"
            options={known.map((value) => ({ value, label: value }))}
            value={set}
            onChange={(event) => setSet(event.target.value)}
            fieldClassName="w-72"
          />
          <Button
            icon={<Plus />}
            onClick={() => {
              if (set !== "") onAdd("function", set);
              setSet("");
            }}
          >
            Mark it
          </Button>
        </div>
      )}
      <div className="flex flex-wrap items-end gap-2">
        <TextInput
          label="By its name"
          hint="Spelt exactly as in the description."
          list={listId}
          value={name}
          onChange={(event) => setName(event.target.value)}
          fieldClassName="w-72"
        />
        <datalist id={listId}>
          {known.map((value) => (
            <option key={value} value={value} />
          ))}
        </datalist>
        <Button icon={<Plus />} onClick={typed("characteristic")}>
          Mark the characteristic
        </Button>
        <Button icon={<Plus />} onClick={typed("function")}>
          Mark the function
        </Button>
      </div>
    </div>
  );
}
