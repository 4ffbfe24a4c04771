"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useState } from "react";
import { FormProvider, useForm } from "react-hook-form";
import type { z } from "zod";
import { VehicleSheetFields } from "@/components/features/programmes/sheet-fields";
import { EMPTY_SHEET } from "@/components/features/programmes/sheet-values";
import { Button } from "@/components/ui/action/button";
import { TextInput } from "@/components/ui/form/text-input";
import { Textarea } from "@/components/ui/form/textarea";
import { Notice } from "@/components/ui/status/notice";
import { newProgrammeSchema } from "@/lib/services/programmes/schema";

type Fields = z.input<typeof newProgrammeSchema>;
type Parsed = z.output<typeof newProgrammeSchema>;

export interface NewProgrammeFormProps {
  action: (input: Parsed) => Promise<{ ok: boolean; message?: string }>;
}

/** Name, goal and the first vehicle sheet of a new programme. */
export function NewProgrammeForm({ action }: NewProgrammeFormProps) {
  const form = useForm<Fields, unknown, Parsed>({
    resolver: zodResolver(newProgrammeSchema),
    defaultValues: { name: "", goal: "", sheet: EMPTY_SHEET },
  });
  const [problem, setProblem] = useState<string | null>(null);
  const { register, formState } = form;
  const send = form.handleSubmit(async (parsed) => {
    setProblem(null);
    const state = await action(parsed);
    if (!state.ok) setProblem(state.message ?? "It was not saved.");
  });
  const wrong = Object.keys(formState.errors).length > 0;
  return (
    <FormProvider {...form}>
      <form onSubmit={send} noValidate className="flex max-w-3xl flex-col gap-8">
        <fieldset className="grid gap-4">
          <legend className="mb-3 font-head font-semibold text-17">Programme</legend>
          <TextInput
            label="Name"
            required
            hint="One vehicle with one control unit, tuned toward one goal."
            {...register("name")}
            error={formState.errors.name?.message}
          />
          <Textarea
            label="Goal"
            rows={2}
            hint="What shall be better, and what must not get worse."
            {...register("goal")}
            error={formState.errors.goal?.message}
          />
        </fieldset>
        <VehicleSheetFields />
        {(problem || wrong) && (
          <Notice tone="problem" live>
            {problem ?? "Some fields need another look: each says why."}
          </Notice>
        )}
        <div>
          <Button type="submit" look="filled" disabled={formState.isSubmitting}>
            {formState.isSubmitting ? "Making …" : "Make programme"}
          </Button>
        </div>
      </form>
    </FormProvider>
  );
}
