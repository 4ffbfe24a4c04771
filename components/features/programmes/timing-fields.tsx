"use client";

import type { UseFormRegister } from "react-hook-form";
import type { SheetFields } from "@/components/features/programmes/sheet-values";
import { NumberInput } from "@/components/ui/form/number-input";
import { TextInput } from "@/components/ui/form/text-input";

export interface TimingFieldsProps {
  register: UseFormRegister<SheetFields>;
  errorOf: (name: string) => string | undefined;
}

/** What this programme times beside the usual ranges, and how much fall of the road it takes. */
export function TimingFields({ register, errorOf }: TimingFieldsProps) {
  const field = (name: "speedPairs" | "distancesM" | "fallLimitPct") => ({
    ...register(`sheet.timings.${name}`),
    error: errorOf(`sheet.timings.${name}`),
  });
  return (
    <>
      <TextInput
        label="Own speed ranges"
        mono
        hint="km/h unless mph is written, parted by spaces: 90-130 30-90 mph"
        {...field("speedPairs")}
        fieldClassName="sm:col-span-2"
      />
      <TextInput
        label="Own distances, m"
        mono
        hint="From rest, parted by spaces: 304.8 804.672"
        {...field("distancesM")}
      />
      <NumberInput
        label="Limit of the net fall"
        unit="%"
        hint="A sprint on a steeper road gets a note; empty: 0.5"
        {...field("fallLimitPct")}
      />
    </>
  );
}
