"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useEffect, useState } from "react";
import { useForm } from "react-hook-form";
import type { z } from "zod";
import { PurposeFields, type PurposeFieldsProps } from "@/components/features/road-days/purpose-fields";
import { Button } from "@/components/ui/action/button";
import { NumberInput } from "@/components/ui/form/number-input";
import { TextInput } from "@/components/ui/form/text-input";
import { Notice } from "@/components/ui/status/notice";
import {
  type editRoadDaySchema,
  type newRoadDaySchema,
  type RoadDayPurpose,
  roadDayFields,
} from "@/lib/services/road-days/schema";

type Fields = z.input<typeof roadDayFields>;
type Parsed = z.output<typeof roadDayFields>;
type Identity =
  | Pick<z.input<typeof newRoadDaySchema>, "programmeId">
  | Pick<z.input<typeof editRoadDaySchema>, "roadDayId" | "rowVersion">;

export interface RoadDayFormProps {
  /** Which programme gets a new day, or which day is corrected. */
  identity: Identity;
  values: Fields;
  /** Strips driven before, offered while typing. */
  strips: readonly string[];
  /** Test mass of the vehicle sheet, kg; counts when no mass of the day is given. */
  sheetMassKg: number;
  submitWords: string;
  blockedBecause: string | null;
  /** What a new day may be opened for; null where a day is corrected, whose purpose is fixed. */
  purpose: (Pick<PurposeFieldsProps, "revisions"> & { plannedTwins: number | null }) | null;
  action: (input: Identity & RoadDayPurpose & Parsed) => Promise<{
    ok: boolean;
    message?: string;
    fields?: Record<string, string[] | undefined>;
  }>;
}

/** Strip, crew, weather at the car and the car's state on one day. */
export function RoadDayForm({
  identity,
  values,
  strips,
  sheetMassKg,
  submitWords,
  blockedBecause,
  purpose,
  action,
}: RoadDayFormProps) {
  const form = useForm<Fields, unknown, Parsed>({
    resolver: zodResolver(roadDayFields),
    defaultValues: values,
  });
  const { register, formState, setValue, getValues, setError } = form;
  const [chosen, setChosen] = useState<RoadDayPurpose>({ plannedTwins: purpose?.plannedTwins ?? null });
  const [outcome, setOutcome] = useState<{ ok: boolean; message: string } | null>(null);
  const error = (name: keyof Fields) => formState.errors[name]?.message;

  useEffect(() => {
    // Only the browser knows the day and the zone at the road side.
    const zone = Intl.DateTimeFormat().resolvedOptions().timeZone;
    if (getValues("zone") === "") setValue("zone", zone);
    if (getValues("day") === "") setValue("day", new Date().toLocaleDateString("en-CA", { timeZone: zone }));
  }, [getValues, setValue]);

  const send = form.handleSubmit(async (parsed) => {
    setOutcome(null);
    const state = await action({ ...identity, ...(purpose && chosen), ...parsed });
    for (const [name, sentences] of Object.entries(state.fields ?? {}))
      if (sentences?.[0]) setError(name as keyof Fields, { message: sentences[0] });
    setOutcome({ ok: state.ok, message: state.ok ? "Saved." : (state.message ?? "It was not saved.") });
  });

  return (
    <form onSubmit={send} noValidate className="flex flex-col gap-6">
      {purpose && <PurposeFields revisions={purpose.revisions} value={chosen} onChange={setChosen} />}
      <fieldset className="grid gap-4 sm:grid-cols-2">
        <legend className="mb-2 font-head font-semibold text-17">Place and people</legend>
        <TextInput
          label="Day"
          type="date"
          required
          {...register("day")}
          error={error("day")}
          hint="The date on the road"
        />
        <TextInput
          label="Time zone of the road"
          required
          {...register("zone")}
          error={error("zone")}
          hint="By name, e.g. Europe/Berlin"
        />
        <TextInput
          label="Strip"
          required
          list="strips"
          {...register("stripName")}
          error={error("stripName")}
        />
        <datalist id="strips">
          {strips.map((strip) => (
            <option key={strip} value={strip} />
          ))}
        </datalist>
        <NumberInput
          label="Usable length"
          unit="m"
          {...register("stripLengthM")}
          error={error("stripLengthM")}
        />
        <TextInput
          label="Driver"
          required
          {...register("driver")}
          error={error("driver")}
          hint="Trained for these speeds"
        />
        <TextInput
          label="At the recorder"
          required
          {...register("recorder")}
          error={error("recorder")}
          hint="A second person, never the driver"
        />
      </fieldset>
      <fieldset className="grid gap-4 sm:grid-cols-3">
        <legend className="mb-2 font-head font-semibold text-17">Weather at the car</legend>
        <NumberInput
          label="Air temperature"
          required
          unit="°C"
          {...register("tempC")}
          error={error("tempC")}
          hint="In the shade, at the car"
        />
        <NumberInput
          label="Station pressure"
          required
          unit="hPa"
          {...register("pressureHpa")}
          error={error("pressureHpa")}
          hint="As read there, not reduced to sea level"
        />
        <NumberInput
          label="Relative humidity"
          required
          unit="%"
          {...register("humidityPct")}
          error={error("humidityPct")}
          hint="At the car"
        />
        <TextInput
          label="Wind"
          {...register("windNote")}
          error={error("windNote")}
          hint="E.g. light, from the left on the way out"
          fieldClassName="sm:col-span-3"
        />
      </fieldset>
      <fieldset className="grid gap-4 sm:grid-cols-3">
        <legend className="mb-2 font-head font-semibold text-17">The car on this day</legend>
        <TextInput
          label="Fuel"
          {...register("fuelNote")}
          error={error("fuelNote")}
          hint="Grade, ethanol share, fill"
          fieldClassName="sm:col-span-3"
        />
        <NumberInput
          label="Tyres in front"
          unit="kPa"
          {...register("tyrePressureFrontKpa")}
          error={error("tyrePressureFrontKpa")}
          hint="Warm; 2.4 bar = 240 kPa"
        />
        <NumberInput
          label="Tyres at the rear"
          unit="kPa"
          {...register("tyrePressureRearKpa")}
          error={error("tyrePressureRearKpa")}
          hint="Warm"
        />
        <NumberInput
          label="Mass of the day"
          unit="kg"
          {...register("massKg")}
          error={error("massKg")}
          hint={`Empty: the sheet's ${Math.round(sheetMassKg)} kg`}
        />
      </fieldset>
      {outcome && (
        <Notice tone={outcome.ok ? "plain" : "problem"} live>
          {outcome.message}
        </Notice>
      )}
      <div>
        <Button
          type="submit"
          look="filled"
          size="roadside"
          blockedBecause={blockedBecause}
          disabled={formState.isSubmitting}
        >
          {formState.isSubmitting ? "Saving …" : submitWords}
        </Button>
      </div>
    </form>
  );
}
