"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useState, useTransition } from "react";
import { useForm } from "react-hook-form";
import { SigningField } from "@/components/features/decisions/signing-field";
import { Button } from "@/components/ui/action/button";
import { TextInput } from "@/components/ui/form/text-input";
import { Textarea } from "@/components/ui/form/textarea";
import { Notice } from "@/components/ui/status/notice";
import { type RollBackInput, rollBackInput } from "@/lib/services/decisions/schema";

export interface RollBackFormProps {
  programmeId: string;
  toRevisionId: string;
  standingRevisionId: string;
  toNumber: number;
  standingNumber: number;
  blockedBecause: string | null;
  hasPassphrase: boolean;
  action: (input: unknown) => Promise<{ ok: boolean; message?: string }>;
}

/** Confirms a roll-back: reason, typed number, passphrase. */
export function RollBackForm(props: RollBackFormProps) {
  const { programmeId, toRevisionId, standingRevisionId, toNumber, standingNumber } = props;
  const [pending, start] = useTransition();
  const [refusal, setRefusal] = useState<string | null>(null);
  const form = useForm<RollBackInput>({
    resolver: zodResolver(rollBackInput),
    defaultValues: {
      programmeId,
      toRevisionId,
      standingRevisionId,
      reason: "",
      typedNumber: "",
      passphrase: "",
    },
  });
  const { errors } = form.formState;
  const send = form.handleSubmit((input) =>
    start(async () => {
      setRefusal(null);
      const answer = await props.action(input);
      if (answer.ok) return;
      form.resetField("passphrase");
      setRefusal(answer.message ?? "Nothing was changed. Try again.");
    }),
  );
  const blockedBecause =
    props.blockedBecause ??
    (props.hasPassphrase ? null : "Set a signing passphrase on your account page first.");
  return (
    <form onSubmit={send} noValidate className="flex flex-col gap-4">
      <Textarea
        label="Reason"
        hint="Printed on the record."
        required
        error={errors.reason?.message}
        {...form.register("reason")}
      />
      <TextInput
        label="Number of the revision that stands again"
        hint={`Type R${toNumber}, so that no other is meant.`}
        required
        mono
        autoComplete="off"
        error={errors.typedNumber?.message}
        {...form.register("typedNumber")}
      />
      <SigningField
        hasPassphrase={props.hasPassphrase}
        error={errors.passphrase?.message}
        field={form.register("passphrase")}
      />
      {refusal && (
        <Notice tone="problem" title="Nothing was changed" live>
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
        {pending ? "Signing …" : `Sign and roll back from R${standingNumber} to R${toNumber}`}
      </Button>
    </form>
  );
}
