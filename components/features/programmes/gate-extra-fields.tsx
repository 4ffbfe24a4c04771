"use client";

import { get, useFormContext } from "react-hook-form";
import type { GateExtras, PlanFields } from "@/components/features/programmes/gate-field-words";
import { Checkbox } from "@/components/ui/form/checkbox";
import { Select } from "@/components/ui/form/select";
import { Textarea } from "@/components/ui/form/textarea";

interface GateExtraFieldsProps {
  words: GateExtras;
  index: number;
  /** Of the gate: several gates have fields of the same name. */
  title: string;
}

/** What a gate asks beside its numbers: names, choices and ticks, below its line. Nothing where it asks none. */
export function GateExtraFields({ words, index, title }: GateExtraFieldsProps) {
  const { register, formState } = useFormContext<PlanFields>();
  const { lists = [], choices = [], ticks = [] } = words;
  if (lists.length + choices.length + ticks.length === 0) return null;
  const field = (name: string) => ({
    ...register(`gates.${index}.${name}`),
    error: get(formState.errors, `gates.${index}.${name}.message`) as string | undefined,
  });
  return (
    <div className="grid gap-x-4 gap-y-3 sm:grid-cols-2 md:col-span-full">
      {lists.map(({ name, label, hint }) => (
        <Textarea
          key={name}
          label={label}
          aria-label={`${label}: ${title}`}
          hint={hint}
          rows={2}
          className="tabular"
          {...field(name)}
        />
      ))}
      {choices.map(({ name, label, options }) => (
        <Select
          key={name}
          label={label}
          aria-label={`${label}: ${title}`}
          options={options}
          {...field(name)}
        />
      ))}
      {ticks.map(({ name, label }) => (
        <Checkbox key={name} label={label} {...field(name)} />
      ))}
    </div>
  );
}
