"use client";

import { Trash2 } from "lucide-react";
import { useFormContext } from "react-hook-form";
import { GateExtraFields } from "@/components/features/programmes/gate-extra-fields";
import type { PlanFields } from "@/components/features/programmes/gate-field-words";
import { gateWords, LEVEL_WORDS } from "@/components/features/programmes/gate-words";
import { choices } from "@/components/features/programmes/sheet-words";
import { NumberInput } from "@/components/ui/form/number-input";
import { Select } from "@/components/ui/form/select";
import type { Gate } from "@/lib/gates/plan";

interface GateRowProps {
  gate: Gate;
  index: number;
  /** Given for gates that were added by hand: takes it out again. */
  onRemove?: () => void;
}

/** One gate: how much it binds, and its numbers. */
export function GateRow({ gate, index, onRemove }: GateRowProps) {
  const { register, formState } = useFormContext<PlanFields>();
  const words = gateWords(gate);
  const { title, note, numbers } = words;
  const errors = formState.errors.gates?.[index] as Record<string, { message?: string }> | undefined;
  return (
    <li className="grid gap-x-4 gap-y-2 border-line border-t py-3 first:border-t-0 md:grid-cols-[minmax(0,1fr)_8rem_22rem_2.75rem] md:items-start">
      <div className="self-center md:pt-6">
        <p className="font-medium text-15">{title}</p>
        {note && <p className="text-13 text-ink2">{note}</p>}
      </div>
      <Select
        label="Level"
        aria-label={`Level of: ${title}`}
        options={choices(LEVEL_WORDS)}
        {...register(`gates.${index}.level`)}
      />
      <div className="grid grid-cols-3 gap-2">
        {numbers.map((number) => (
          <NumberInput
            key={number.name}
            label={number.label}
            unit={number.unit}
            {...register(`gates.${index}.${number.name}`)}
            error={errors?.[number.name]?.message}
          />
        ))}
      </div>
      {onRemove && (
        <button
          type="button"
          onClick={onRemove}
          aria-label={`Take out: ${title}`}
          className="inline-flex size-11 items-center justify-center self-start rounded text-ink2 hover:bg-sunk hover:text-ink md:mt-6"
        >
          <Trash2 aria-hidden size={18} />
        </button>
      )}
      <GateExtraFields words={words} index={index} title={title} />
    </li>
  );
}
