"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useState } from "react";
import { FormProvider, useForm } from "react-hook-form";
import { z } from "zod";
import { VehicleSheetFields } from "@/components/features/programmes/sheet-fields";
import { sheetValues } from "@/components/features/programmes/sheet-values";
import { Button } from "@/components/ui/action/button";
import { Notice } from "@/components/ui/status/notice";
import { showToast } from "@/components/ui/status/toast";
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
  }) => Promise<{ ok: boolean; message?: string; value?: { version: number } }>;
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
  const [problem, setProblem] = useState<string | null>(null);
  const { formState } = form;
  const send = form.handleSubmit(async ({ sheet }) => {
    setProblem(null);
    const state = await action({ programmeId, basedOnVersion: version, figures: sheet });
    const saved = state.value?.version;
    const words =
      saved === version ? "Nothing was changed, so no version was added." : `Version ${saved} is saved.`;
    if (state.ok) showToast(words);
    else setProblem(state.message ?? "It was not saved.");
  });
  const wrong = Object.keys(formState.errors).length > 0;
  return (
    <FormProvider {...form}>
      <form onSubmit={send} noValidate className="flex flex-col gap-8">
        <VehicleSheetFields />
        {(wrong || problem) && (
          <Notice tone="problem" live>
            {wrong ? "Some fields need another look: each says why." : problem}
          </Notice>
        )}
        <div>
          <Button
            type="submit"
            look="filled"
            blockedBecause={blockedBecause}
            disabled={formState.isSubmitting}
          >
            {formState.isSubmitting ? "Saving …" : `Save as version ${version + 1}`}
          </Button>
        </div>
      </form>
    </FormProvider>
  );
}
