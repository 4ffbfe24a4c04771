"use client";
import { type Control, Controller, type FieldErrors, type UseFormRegister } from "react-hook-form";
import { INTENDED_USE_WORDS } from "@/components/features/revisions/words";
import { RadioCards } from "@/components/ui/form/radio-cards";
import { TextInput } from "@/components/ui/form/text-input";
import { Textarea } from "@/components/ui/form/textarea";
import type { RevisionFormValues, RevisionText } from "@/lib/services/revisions/schema";

export interface RevisionFieldsProps {
  register: UseFormRegister<RevisionFormValues>;
  control: Control<RevisionFormValues, unknown, RevisionText>;
  errors: FieldErrors<RevisionFormValues>;
}

/** What a calibrator states of a revision; used for a new one and for a draft. */
export function RevisionFields({ register, control, errors }: RevisionFieldsProps) {
  return (
    <div className="flex flex-col gap-5">
      <TextInput
        label="Title"
        hint={'A few words, e.g. "boost ramp".'}
        required
        error={errors.title?.message}
        {...register("title")}
      />
      <Textarea
        label="Why it was changed"
        hint="What the change is meant to do, and where. Needed before runs are driven with it."
        error={errors.changeReason?.message}
        {...register("changeReason")}
      />
      <Controller
        control={control}
        name="intendedUse"
        render={({ field }) => (
          <RadioCards
            name={field.name}
            value={field.value}
            onChange={field.onChange}
            legend="Intended use"
            columns={3}
            error={errors.intendedUse?.message}
            options={Object.entries(INTENDED_USE_WORDS).map(([value, label]) => ({ value, label }))}
          />
        )}
      />
      <Controller
        control={control}
        name="touchesEmissionOrSafety"
        render={({ field }) => (
          <RadioCards
            name={field.name}
            value={field.value}
            onChange={field.onChange}
            legend="Does it touch emission- or safety-relevant functions?"
            columns={2}
            options={[
              { value: "no", label: "No" },
              { value: "yes", label: "Yes", description: "A lead sees this beside the decision." },
            ]}
          />
        )}
      />
      <Textarea
        label="Note"
        hint="Anything else a colleague should know."
        error={errors.note?.message}
        {...register("note")}
      />
    </div>
  );
}
