"use client";

import { useFormContext } from "react-hook-form";
import type { DecisionFields } from "@/components/features/decisions/decision-fields";
import { TextInput } from "@/components/ui/form/text-input";

/** By whose word marked functions are released for the road: a named document, or a second lead who has agreed. */
export function ApprovalFields({ agreedBy }: { agreedBy: readonly string[] }) {
  const { register, formState } = useFormContext<DecisionFields>();
  const errors = formState.errors.approval;
  return (
    <fieldset className="flex flex-col gap-3">
      <legend className="mb-2 font-semibold text-15">Approval for the road</legend>
      <p className="text-15">
        {agreedBy.length > 0
          ? `${agreedBy.join(" and ")} agreed as second lead. A document may be named as well.`
          : "This changes what is or may be marked as emission- or safety-relevant. Name the document that approves it, or have a second lead agree first."}
      </p>
      <TextInput
        label="Approval document"
        hint="Its name or number; printed on the record."
        required={agreedBy.length === 0}
        error={errors?.document?.message}
        {...register("approval.document")}
      />
      <TextInput
        label="Issued by"
        required={agreedBy.length === 0}
        error={errors?.issuer?.message}
        {...register("approval.issuer")}
      />
    </fieldset>
  );
}
