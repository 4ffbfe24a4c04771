"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { FormProvider, useForm } from "react-hook-form";
import { z } from "zod";
import {
  SaveVersion,
  useSaveVersion,
  type VersionAnswer,
} from "@/components/features/programmes/save-version";
import { VehicleSheetFields } from "@/components/features/programmes/sheet-fields";
import { sheetValues } from "@/components/features/programmes/sheet-values";
import type { VehicleSheetFigures } from "@/lib/measure/vehicle/vehicle-sheet";
import { vehicleSheetSchema } from "@/lib/services/vehicle-sheets/schema";

const schema = z.object({ sheet: vehicleSheetSchema });
type Parsed = z.output<typeof schema>;

export interface VehicleSheetFormProps {
  programmeId: string;
  version: number;
  figures: VehicleSheetFigures;
  blockedBecause: string | null;
  action: (input: {
    programmeId: string;
    basedOnVersion: number;
    figures: VehicleSheetFigures;
  }) => Promise<VersionAnswer>;
}

/** The newest sheet, to be changed into the next version. */
export function VehicleSheetForm({
  programmeId,
  version,
  figures,
  blockedBecause,
  action,
}: VehicleSheetFormProps) {
  const form = useForm<z.input<typeof schema>, unknown, Parsed>({
    resolver: zodResolver(schema),
    defaultValues: { sheet: sheetValues(figures) },
  });
  const { save, ...state } = useSaveVersion(version);
  const send = form.handleSubmit(({ sheet }) =>
    save(() => action({ programmeId, basedOnVersion: version, figures: sheet })),
  );
  const wrong = Object.keys(form.formState.errors).length > 0;
  return (
    <FormProvider {...form}>
      <form onSubmit={send} noValidate className="flex flex-col gap-8">
        <VehicleSheetFields />
        <SaveVersion
          version={version}
          blockedBecause={blockedBecause}
          {...state}
          problem={wrong ? "Some fields need another look: each says why." : state.problem}
        />
      </form>
    </FormProvider>
  );
}
