"use client";

import { useFormContext } from "react-hook-form";
import { MassParts } from "@/components/features/programmes/mass-parts";
import type { SheetFields, SheetValues } from "@/components/features/programmes/sheet-values";
import {
  ASPIRATION_WORDS,
  choices,
  DRIVE_WORDS,
  ENGINE_WORDS,
} from "@/components/features/programmes/sheet-words";
import { TimingFields } from "@/components/features/programmes/timing-fields";
import { NumberInput } from "@/components/ui/form/number-input";
import { Select } from "@/components/ui/form/select";
import { TextInput } from "@/components/ui/form/text-input";

type FigureName = "rollingCircumferenceM" | "engineInertiaKgm2" | "wheelInertiaKgm2" | "meshEfficiency";

const legend = "mb-3 font-head font-semibold text-17";

/** The sentence at a field, also inside lists and pairs. */
function messageAt(errors: object, name: string): string | undefined {
  const found = name.split(".").reduce<unknown>((at, key) => (at as Record<string, unknown>)?.[key], errors);
  const { message, root } = (found ?? {}) as { message?: unknown; root?: { message?: unknown } };
  const text = message ?? root?.message;
  return typeof text === "string" ? text : undefined;
}

/** The figures of a vehicle sheet; part of a form whose values lie under `sheet`. */
export function VehicleSheetFields() {
  const { register, control, formState } = useFormContext<SheetFields>();
  const errorOf = (name: string) => messageAt(formState.errors, name);
  const field = (name: Exclude<keyof SheetValues, "timings">) => ({
    ...register(`sheet.${name}`),
    error: errorOf(`sheet.${name}`),
  });
  const figure = (name: FigureName, label: string, unit: string | undefined, hint: string) => (
    <div className="grid grid-cols-[3fr_2fr] items-end gap-2">
      <NumberInput
        label={label}
        unit={unit}
        hint={hint}
        {...register(`sheet.${name}.value`)}
        error={errorOf(`sheet.${name}.value`)}
      />
      <NumberInput
        label="±"
        unit={unit}
        hint="standard uncertainty"
        {...register(`sheet.${name}.uncertainty`)}
        error={errorOf(`sheet.${name}.uncertainty`)}
      />
    </div>
  );
  return (
    <>
      <fieldset className="grid gap-4 sm:grid-cols-2">
        <legend className={legend}>Vehicle and engine</legend>
        <TextInput
          label="Vehicle"
          required
          hint="As you call it, e.g. Hatch 2.0 petrol, turbo"
          {...field("label")}
          fieldClassName="sm:col-span-2"
        />
        <Select label="Engine" options={choices(ENGINE_WORDS)} {...field("engine")} />
        <Select label="Charging" options={choices(ASPIRATION_WORDS)} {...field("aspiration")} />
        <Select label="Driven wheels" options={choices(DRIVE_WORDS)} {...field("drive")} />
        <NumberInput label="Displacement" unit="L" {...field("displacementL")} />
        <NumberInput label="Idle speed" unit="1/min" hint="Warm, in neutral" {...field("idleRpm")} />
        <NumberInput
          label="Speed limiter"
          required
          unit="1/min"
          hint="Where the limiter cuts in"
          {...field("redlineRpm")}
        />
      </fieldset>
      <fieldset>
        <legend className={legend}>Test mass by part</legend>
        <MassParts control={control} register={register} errorOf={errorOf} />
      </fieldset>
      <fieldset className="grid gap-4 sm:grid-cols-2">
        <legend className={legend}>Gearing and tyres</legend>
        <TextInput
          label="Gear ratios"
          mono
          hint="First gear first, parted by spaces: 3.62 2.11 1.44"
          {...field("gearRatios")}
          fieldClassName="sm:col-span-2"
        />
        <NumberInput label="Final drive" hint="Ratio of the driven axle" {...field("finalDrive")} />
        <TextInput label="Tyre marking" mono hint="E.g. 225/40 R18" {...field("tyre")} />
        <div className="sm:col-span-2">
          {figure(
            "rollingCircumferenceM",
            "Rolling circumference",
            "m",
            "Rolled out on the ground; empty: from the tyre marking",
          )}
        </div>
        <div className="grid gap-2 sm:col-span-2 sm:grid-cols-3">
          <NumberInput
            label="Gear"
            hint="Road speed read off once, in this gear"
            {...register("sheet.speedAtRpm.gear")}
            error={errorOf("sheet.speedAtRpm.gear")}
          />
          <NumberInput
            label="at engine speed"
            unit="1/min"
            hint="Steady, without slip"
            {...register("sheet.speedAtRpm.rpm")}
            error={errorOf("sheet.speedAtRpm.rpm")}
          />
          <NumberInput
            label="at road speed"
            unit="km/h"
            hint="By satellite, not by the dial"
            {...register("sheet.speedAtRpm.speedKmh")}
            error={errorOf("sheet.speedAtRpm.speedKmh")}
          />
        </div>
      </fieldset>
      <fieldset className="grid gap-4">
        <legend className={legend}>Rotating parts and losses</legend>
        <p className="-mt-2 max-w-prose text-13 text-ink2">
          Leave empty what is not known: a default by class takes its place, with a wider uncertainty, and the
          result says so.
        </p>
        {figure("engineInertiaKgm2", "Inertia of the engine", "kg m²", "Crankshaft, flywheel and clutch")}
        {figure("wheelInertiaKgm2", "Inertia of all wheels", "kg m²", "Sum of the four")}
        {figure(
          "meshEfficiency",
          "Efficiency of the gear meshes",
          undefined,
          "Between 0.5 and 1, loaded meshes only",
        )}
        <NumberInput
          label="Injected quantity"
          unit="mg/L"
          hint="Compression ignition only: mg per litre and cycle, for the weather factor"
          {...field("fuelQuantityMgPerLCycle")}
          fieldClassName="sm:max-w-xs"
        />
      </fieldset>
      <fieldset className="grid gap-4 sm:grid-cols-2">
        <legend className={legend}>Times</legend>
        <TimingFields register={register} errorOf={errorOf} />
      </fieldset>
    </>
  );
}
