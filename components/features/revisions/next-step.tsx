import type { Route } from "next";
import type { ReactNode } from "react";
import { StepForm, type StepFormProps } from "@/components/features/revisions/step-form";
import { LinkButton } from "@/components/ui/action/link-button";
import { Checkbox } from "@/components/ui/form/checkbox";
import { TextInput } from "@/components/ui/form/text-input";
import { Card } from "@/components/ui/layout/card";
import { Disclosure } from "@/components/ui/layout/disclosure";

type Step = StepFormProps["action"];

export interface NextStepProps {
  revision: { id: string; number: number; state: string; isSetAside: boolean };
  standing: { id: string; number: number } | null;
  missing: { validating: string[]; decision: string[] };
  /** Reasons of the policy by action; null = allowed. */
  refused: Record<"validate" | "ask" | "withdraw" | "setAside" | "adopt", string | null>;
  actions: Record<"validate" | "ask" | "withdraw" | "setAside" | "bringBack" | "adopt", Step>;
  /** Shown while it is compared or decided. */
  compare?: ReactNode;
}

/** What can be done with a revision now: the way on first, the ways out behind a fold. */
export function NextStep({ revision, standing, missing, refused, actions, compare }: NextStepProps) {
  const { id, number, state, isSetAside } = revision;
  if (isSetAside) {
    return (
      <Card title="Set aside" tone="well">
        <StepForm
          revisionId={id}
          action={actions.bringBack}
          button="Bring it back"
          blockedBecause={refused.setAside}
          reasonLabel="Why it comes back"
        />
      </Card>
    );
  }
  return (
    <Card title="Next step" tone="well">
      <div className="flex flex-col gap-4">
        {state === "draft" && (
          <>
            <p className="text-15">Validating freezes image and text. From then on runs can be attached.</p>
            <StepForm
              revisionId={id}
              action={actions.validate}
              look="filled"
              button="Start validating"
              blockedBecause={refused.validate ?? (missing.validating.join(" ") || null)}
            />
          </>
        )}
        {state === "validating" && (
          <>
            {compare}
            <StepForm
              revisionId={id}
              action={actions.ask}
              look="filled"
              button="Ask for a decision"
              blockedBecause={refused.ask ?? (missing.decision.join(" ") || null)}
            />
          </>
        )}
        {state === "in_review" && (
          <>
            {compare}
            <p className="text-15">A lead who neither made it nor asked decides.</p>
            <LinkButton look="filled" href={`/revisions/${id}/decide` as Route}>
              Open the decision on R{number}
            </LinkButton>
          </>
        )}
        {!["draft", "validating", "in_review"].includes(state) && compare}
        {state === "draft" && !standing && (
          <Disclosure summary="Adopt as found">
            <p className="mb-3 text-15">
              The image the car came with stands without gates and is always a target for rolling back.
            </p>
            <StepForm
              revisionId={id}
              action={actions.adopt}
              button="Sign and adopt as found"
              blockedBecause={refused.adopt}
              reasonLabel="Why this is the image as found"
            >
              <TextInput
                label="How it was read"
                name="howRead"
                required
                hint="Tool and way, whole or partial."
              />
              <Checkbox name="secondReadEqual" label="A second read gave the same bytes" />
              <TextInput
                label="Your signing passphrase"
                name="passphrase"
                type="password"
                autoComplete="off"
                required
              />
            </StepForm>
          </Disclosure>
        )}
        {(state === "draft" || state === "validating") && (
          <Disclosure summary="Withdraw">
            <StepForm
              revisionId={id}
              action={actions.withdraw}
              button={`Withdraw R${number}`}
              blockedBecause={refused.withdraw}
              reasonLabel="Why it is withdrawn"
            />
          </Disclosure>
        )}
        {state === "draft" && (
          <Disclosure summary="Set aside a mistaken upload">
            <StepForm
              revisionId={id}
              action={actions.setAside}
              button={`Set R${number} aside`}
              blockedBecause={refused.setAside}
              reasonLabel="Why it is set aside"
            />
          </Disclosure>
        )}
      </div>
    </Card>
  );
}
