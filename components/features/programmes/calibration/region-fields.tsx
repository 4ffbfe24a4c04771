"use client";

import { Trash2 } from "lucide-react";
import { useFormContext } from "react-hook-form";
import type { TypedRegion } from "@/components/features/programmes/calibration/region-values";
import {
  ALGORITHM_WORDS,
  COMPLEMENT_WORDS,
  ORDER_WORDS,
} from "@/components/features/programmes/calibration/region-words";
import { choices } from "@/components/features/programmes/sheet-words";
import { Button } from "@/components/ui/action/button";
import { Checkbox } from "@/components/ui/form/checkbox";
import { Select } from "@/components/ui/form/select";
import { TextInput } from "@/components/ui/form/text-input";

export interface RegionsFields {
  regions: TypedRegion[];
}

/** One region: where, how it is summed, and against what it is held. */
export function RegionFields({ index, onRemove }: { index: number; onRemove: () => void }) {
  const { register, watch, formState } = useFormContext<RegionsFields>();
  const errors = formState.errors.regions?.[index];
  const [name, algorithm] = watch([`regions.${index}.name`, `regions.${index}.algorithm`]);
  const field = <Name extends keyof TypedRegion>(part: Name) => ({
    ...register(`regions.${index}.${part}`),
    error: errors?.[part]?.message,
  });
  const title = name || `Region ${index + 1}`;
  return (
    <li
      aria-label={title}
      className="flex flex-col gap-3 border-line border-t py-4 first:border-t-0 first:pt-0"
    >
      <div className="grid gap-3 sm:grid-cols-2 sm:items-end">
        <TextInput label="Name" required {...field("name")} />
        <Select label="Checksum" options={choices(ALGORITHM_WORDS)} {...field("algorithm")} />
        <TextInput mono label="First address" hint="Of the first byte." required {...field("from")} />
        <TextInput mono label="Last address" hint="Of the last byte." required {...field("to")} />
        <TextInput mono label="Stored at" hint="Empty: it is not stored." {...field("storedAt")} />
        <Select label="Stored with" options={choices(ORDER_WORDS)} {...field("byteOrder")} />
        <TextInput mono label="Must be" hint="Empty: as stored." {...field("expected")} />
        <TextInput
          mono
          label="Left out"
          hint="Stretches inside, e.g. 0x810000-0x81000F. The stored value is left out by itself."
          {...field("excluded")}
        />
      </div>
      {algorithm.startsWith("crc") ? (
        <div className="grid gap-3 sm:grid-cols-3">
          <TextInput mono label="Polynomial" {...field("polynomial")} />
          <TextInput mono label="Start value" {...field("initial")} />
          <TextInput mono label="Final XOR" {...field("finalXor")} />
          <Checkbox label="Input reflected" {...register(`regions.${index}.reflectIn`)} />
          <Checkbox label="Output reflected" {...register(`regions.${index}.reflectOut`)} />
        </div>
      ) : (
        <div className="grid gap-3 sm:grid-cols-3">
          <Select
            label="Word"
            options={choices({ "1": "1 byte", "2": "2 bytes", "4": "4 bytes" })}
            {...field("wordBytes")}
          />
          <Select label="Words with" options={choices(ORDER_WORDS)} {...field("wordOrder")} />
          <Select label="Complement" options={choices(COMPLEMENT_WORDS)} {...field("complement")} />
        </div>
      )}
      <div>
        <Button
          size="compact"
          look="quiet"
          icon={<Trash2 />}
          onClick={onRemove}
          aria-label={`Take out: ${title}`}
        >
          Take out
        </Button>
      </div>
    </li>
  );
}
