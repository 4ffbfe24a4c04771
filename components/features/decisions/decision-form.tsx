"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useState, useTransition } from "react";
import { FormProvider, type Resolver, useForm } from "react-hook-form";
import { ApprovalFields } from "@/components/features/decisions/approval-fields";
import {
  type DecisionFields,
  type SeenByLead,
  toDecideInput,
} from "@/components/features/decisions/decision-fields";
import { SigningField } from "@/components/features/decisions/signing-field";
import { WaiverFields } from "@/components/features/decisions/waiver-fields";
import { Button } from "@/components/ui/action/button";
import { RadioCards } from "@/components/ui/form/radio-cards";
import { TextInput } from "@/components/ui/form/text-input";
import { Textarea } from "@/components/ui/form/textarea";
import { Notice } from "@/components/ui/status/notice";
import type { GateResult } from "@/lib/gates/plan";
import { decideInput } from "@/lib/services/decisions/schema";

export interface DecisionFormProps {
  seen: SeenByLead;
  number: number;
  standingNumber: number | null;
  /** Must gates that are neither met nor out of place. */
  openGates: readonly GateResult[];
  /** Why each step can't be taken by this person now; null when it can. */
  blocked: { promote: string | null; sendBack: string | null; waive: string | null };
  /** Marked functions are or may be changed for the road: a document or a second lead is needed. */
  needsApproval: boolean;
  /** Names of the leads whose agreement counts. */
  agreedBy: readonly string[];
  hasPassphrase: boolean;
  peopleTold: number;
  action: (input: unknown) => Promise<{ ok: boolean; message?: string }>;
}

/** Validates what would be sent, by the schema that the server uses. */
function resolverFor(seen: SeenByLead): Resolver<DecisionFields> {
  const bySchema = zodResolver(decideInput) as unknown as Resolver<DecisionFields>;
  return (fields, context, options) =>
    bySchema(toDecideInput(fields, seen) as DecisionFields, context, options);
}

function consequence(kind: DecisionFields["kind"], props: DecisionFormProps): string | null {
  const name = `R${props.number}`;
  const told = `${props.peopleTold} ${props.peopleTold === 1 ? "person is" : "people are"} told by mail, and a record is made that nobody can edit.`;
  switch (kind) {
    case "promote":
      return props.standingNumber === null
        ? `${name} stands. ${told}`
        : `${name} stands; R${props.standingNumber} is superseded and stays in the lineage. ${told}`;
    case "hold":
      return `${name} goes back to validating, so that more runs can be driven. ${told}`;
    case "turn_down":
      return `${name} is turned down for good; a better image is a new revision. ${told}`;
    case "":
      return null;
  }
}

const SIGN_WORDS = { promote: "Sign and promote", hold: "Sign and hold", turn_down: "Sign and turn down" };

/** The countersign form: promote, hold or turn down, with waivers, reason, typed number and passphrase. */
export function DecisionForm(props: DecisionFormProps) {
  const { seen, number, openGates, blocked, hasPassphrase, needsApproval, agreedBy, action } = props;
  const [pending, start] = useTransition();
  const [refusal, setRefusal] = useState<string | null>(null);
  const form = useForm<DecisionFields>({
    resolver: resolverFor(seen),
    defaultValues: {
      kind: "",
      reason: "",
      typedNumber: "",
      passphrase: "",
      waivers: [],
      approval: { document: "", issuer: "" },
    },
  });
  const { errors } = form.formState;
  const kind = form.watch("kind");
  const waived = form.watch("waivers").length;
  const approval = form.watch("approval");
  const isApproved = approval.document.trim() !== "" && approval.issuer.trim() !== "";
  const unwaived = kind === "promote" ? openGates.length - waived : 0;

  const send = form.handleSubmit(() =>
    start(async () => {
      setRefusal(null);
      const answer = await action(toDecideInput(form.getValues(), seen));
      if (answer.ok) return;
      form.resetField("passphrase");
      setRefusal(answer.message ?? "Nothing was decided. Try again.");
    }),
  );
  const everythingBlocked = blocked.promote !== null && blocked.sendBack !== null;
  const blockedBecause = !hasPassphrase
    ? "Set a signing passphrase on your account page first."
    : everythingBlocked
      ? blocked.sendBack
      : kind === ""
        ? "Choose a decision above."
        : unwaived > 0
          ? `${unwaived === 1 ? "One must gate is" : `${unwaived} must gates are`} not met and not waived.`
          : kind === "promote" && needsApproval && agreedBy.length === 0 && !isApproved
            ? "Name the approval document and its issuer, or have a second lead agree."
            : null;

  return (
    <FormProvider {...form}>
      <form onSubmit={send} noValidate className="flex flex-col gap-5">
        <RadioCards
          legend="Decision"
          required
          options={[
            {
              value: "promote",
              label: "Promote",
              description: `Approve R${number} for release: it stands from now on.`,
              blockedBecause: blocked.promote,
            },
            {
              value: "hold",
              label: "Hold for more runs",
              description: "Not enough is shown yet.",
              blockedBecause: blocked.sendBack,
            },
            {
              value: "turn_down",
              label: "Turn down",
              description: "This image is not released.",
              blockedBecause: blocked.sendBack,
            },
          ]}
          error={errors.kind && "Choose one of the three."}
          name="kind"
          value={kind}
          onChange={(event) => form.setValue("kind", event.target.value as DecisionFields["kind"])}
        />
        {kind === "promote" && openGates.length > 0 && (
          <WaiverFields gates={openGates} blockedBecause={blocked.waive} />
        )}
        {kind === "promote" && needsApproval && <ApprovalFields agreedBy={agreedBy} />}
        {!everythingBlocked && (
          <>
            <Textarea
              label="Reason"
              hint="Printed on the record."
              required
              error={errors.reason?.message}
              {...form.register("reason")}
            />
            {kind === "promote" && (
              <TextInput
                label="Number of the revision"
                hint={`Type R${number}, so that no other is meant.`}
                required
                mono
                autoComplete="off"
                error={errors.typedNumber?.message}
                {...form.register("typedNumber")}
              />
            )}
            <SigningField
              hasPassphrase={hasPassphrase}
              error={errors.passphrase?.message}
              field={form.register("passphrase")}
            />
          </>
        )}
        {consequence(kind, props) && <p className="text-15">What will happen: {consequence(kind, props)}</p>}
        {refusal && (
          <Notice tone="problem" title="Nothing was decided" live>
            {refusal}
          </Notice>
        )}
        <Button
          type="submit"
          look="filled"
          disabled={pending}
          aria-busy={pending || undefined}
          blockedBecause={blockedBecause}
        >
          {pending
            ? "Signing …"
            : kind === ""
              ? "Sign"
              : `${SIGN_WORDS[kind]}${kind === "promote" ? ` R${number}` : ""}`}
        </Button>
      </form>
    </FormProvider>
  );
}
