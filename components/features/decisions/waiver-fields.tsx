"use client";

import { useFieldArray, useFormContext } from "react-hook-form";
import type { DecisionFields } from "@/components/features/decisions/decision-fields";
import { Checkbox } from "@/components/ui/form/checkbox";
import { Textarea } from "@/components/ui/form/textarea";
import { StateMark } from "@/components/ui/status/state-mark";
import type { GateResult } from "@/lib/gates/plan";
import { WAIVER_REASON_MIN } from "@/lib/services/decisions/schema";

interface WaiverFieldsProps {
  gates: readonly GateResult[];
  /** Why this person can't waive; null when they can. */
  blockedBecause: string | null;
}

/** One exception a gate that is not met: named, with a reason that stays on the record. */
export function WaiverFields({ gates, blockedBecause }: WaiverFieldsProps) {
  const { control, register, formState } = useFormContext<DecisionFields>();
  const { fields, append, remove } = useFieldArray({ control, name: "waivers" });
  return (
    <fieldset className="flex flex-col gap-3">
      <legend className="mb-2 font-semibold text-15">
        {gates.length === 1 ? "One must gate is not met" : `${gates.length} must gates are not met`}
      </legend>
      {gates.map((gate) => {
        const index = fields.findIndex((field) => field.gateId === gate.id);
        const errors = index === -1 ? undefined : formState.errors.waivers?.[index];
        return (
          <div key={gate.id} className="flex flex-col gap-1 border-line border-l-2 pl-3">
            <StateMark state={gate.state} />
            <p className="text-15">{gate.title}</p>
            <p className="text-13 text-ink2">{gate.why}</p>
            <Checkbox
              label="Waive this gate"
              hint={blockedBecause ?? undefined}
              disabled={blockedBecause !== null}
              checked={index !== -1}
              onChange={(event) =>
                event.target.checked ? append({ gateId: gate.id, reason: "" }) : remove(index)
              }
            />
            {index !== -1 && (
              <Textarea
                label="Reason for the waiver"
                hint={`At least ${WAIVER_REASON_MIN} characters; printed on the record for ever.`}
                required
                error={errors?.reason?.message}
                {...register(`waivers.${index}.reason`)}
              />
            )}
          </div>
        );
      })}
    </fieldset>
  );
}
