"use client";

import { Plus, Trash2 } from "lucide-react";
import { type Control, useFieldArray, useWatch } from "react-hook-form";
import type { SheetFields } from "@/components/features/programmes/sheet-values";
import { Button } from "@/components/ui/action/button";
import { numberText } from "@/components/ui/data/number-text";
import { FieldError } from "@/components/ui/form/field";
import { NumberInput } from "@/components/ui/form/number-input";
import { TextInput } from "@/components/ui/form/text-input";
import { readTypedNumber } from "@/lib/format/typed-number";

export interface MassPartsProps {
  control: Control<SheetFields>;
  register: (name: `sheet.massPartsKg.${number}.${"part" | "value" | "uncertainty"}`) => object;
  errorOf: (name: string) => string | undefined;
}

/** The test mass by part, each weighed or stated on its own, with the sum as it is typed. */
export function MassParts({ control, register, errorOf }: MassPartsProps) {
  const { fields, append, remove } = useFieldArray({ control, name: "sheet.massPartsKg" });
  const parts = useWatch({ control, name: "sheet.massPartsKg" });
  const masses = parts.map((part) => readTypedNumber(part.value)).filter(Number.isFinite);
  const spreads = parts.map((part) => readTypedNumber(part.uncertainty)).filter(Number.isFinite);
  return (
    <div className="flex flex-col gap-3">
      <ul className="flex flex-col gap-4 sm:gap-2">
        {fields.map((field, index) => (
          <li
            key={field.id}
            className="grid grid-cols-[1fr_1fr_2.75rem] items-end gap-x-2 gap-y-1 sm:grid-cols-[minmax(0,1fr)_9rem_9rem_2.75rem]"
          >
            <TextInput
              label={`Part ${index + 1}`}
              {...register(`sheet.massPartsKg.${index}.part`)}
              error={errorOf(`sheet.massPartsKg.${index}.part`)}
              fieldClassName="col-span-3 sm:col-span-1"
            />
            <NumberInput
              label="Mass"
              unit="kg"
              {...register(`sheet.massPartsKg.${index}.value`)}
              error={errorOf(`sheet.massPartsKg.${index}.value`)}
            />
            <NumberInput
              label="±"
              unit="kg"
              {...register(`sheet.massPartsKg.${index}.uncertainty`)}
              error={errorOf(`sheet.massPartsKg.${index}.uncertainty`)}
            />
            <button
              type="button"
              onClick={() => remove(index)}
              disabled={fields.length === 1}
              aria-label={`Take part ${index + 1} out`}
              className="inline-flex size-11 items-center justify-center rounded text-ink2 hover:bg-sunk hover:text-ink disabled:text-line"
            >
              <Trash2 aria-hidden size={18} />
            </button>
          </li>
        ))}
      </ul>
      <div className="flex flex-wrap items-center justify-between gap-3">
        <Button
          size="compact"
          icon={<Plus />}
          onClick={() => append({ part: "", value: "", uncertainty: "" })}
        >
          Add a part
        </Button>
        <p aria-live="polite" className="text-15">
          Test mass{" "}
          <strong className="tabular">
            {masses.length > 0 ? numberText(masses.reduce((sum, mass) => sum + mass, 0)) : "–"} kg
          </strong>
          {spreads.length > 0 && (
            <span className="tabular text-ink2">
              {" "}
              ± {numberText(Math.hypot(...spreads), { decimals: 1 })} (standard uncertainty)
            </span>
          )}
        </p>
      </div>
      {errorOf("sheet.massPartsKg") && <FieldError>{errorOf("sheet.massPartsKg")}</FieldError>}
    </div>
  );
}
