"use client";

import { useActionState } from "react";
import { TouchedMarks } from "@/components/features/decisions/touched-marks";
import { Button } from "@/components/ui/action/button";
import { TextInput } from "@/components/ui/form/text-input";
import { Textarea } from "@/components/ui/form/textarea";
import { Notice } from "@/components/ui/status/notice";

interface AgreeState {
  ok: boolean;
  message?: string;
  fields?: Record<string, string[] | undefined>;
}

export interface AgreeFormProps {
  revisionId: string;
  calibration: {
    touched: React.ComponentProps<typeof TouchedMarks>["touched"];
    untold: boolean;
    touchedSha256: string | null;
    needsApproval: boolean;
    agreements: readonly { leadName: string; reason: string }[];
    agreeBlocked: string | null;
  };
  action: (state: AgreeState | null, form: FormData) => Promise<AgreeState>;
}

/** What of the changes is marked as emission- or safety-relevant, who has agreed to it, and where a second lead agrees. */
export function AgreeForm({ revisionId, calibration, action }: AgreeFormProps) {
  const { touched, untold, touchedSha256, needsApproval, agreements, agreeBlocked } = calibration;
  const [state, send, pending] = useActionState(action, null);
  return (
    <div className="flex flex-col gap-4">
      {touched.length > 0 && <TouchedMarks touched={touched} />}
      {untold && (
        <p className="text-15">
          Bytes that no description covers are changed. Whether they belong to something marked can't be told.
        </p>
      )}
      {agreements.map(({ leadName, reason }) => (
        <p key={leadName} className="text-15">
          {leadName} agreed: {reason}
        </p>
      ))}
      <div role="status">
        {needsApproval && agreeBlocked !== null && <p className="text-13 text-ink2">{agreeBlocked}</p>}
      </div>
      {needsApproval && agreeBlocked === null && (
        <form action={send} className="flex flex-col gap-3">
          <input type="hidden" name="revisionId" value={revisionId} />
          <input type="hidden" name="touchedSha256" value={touchedSha256 ?? ""} />
          <p className="text-13 text-ink2">
            Whoever agrees as second lead does not promote: another lead does. It holds for exactly these
            changes.
          </p>
          <Textarea
            label="Why you agree"
            hint="Printed on the record."
            name="reason"
            required
            error={state?.fields?.reason?.[0]}
          />
          <TextInput
            label="Your signing passphrase"
            type="password"
            name="passphrase"
            autoComplete="current-password"
            required
            error={state?.fields?.passphrase?.[0]}
          />
          {state && !state.ok && (
            <Notice tone="problem" title="Nothing was agreed" live>
              {state.message}
            </Notice>
          )}
          <Button type="submit" disabled={pending} aria-busy={pending || undefined}>
            {pending ? "Signing …" : "Agree as second lead"}
          </Button>
        </form>
      )}
    </div>
  );
}
