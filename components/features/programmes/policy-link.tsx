import type { ComponentProps } from "react";
import { Button } from "@/components/ui/action/button";
import { LinkButton } from "@/components/ui/action/link-button";
import type { Verdict } from "@/lib/policy/actor";

export interface PolicyLinkProps extends ComponentProps<typeof LinkButton> {
  verdict: Verdict;
}

/** A link that looks like a button for whoever may go there; for others the button is off and says why. */
export function PolicyLink({ verdict, children, ...rest }: PolicyLinkProps) {
  if (verdict.ok)
    return (
      <LinkButton {...rest} className="self-start">
        {children}
      </LinkButton>
    );
  return (
    <Button icon={rest.icon} blockedBecause={verdict.reason} className="max-w-full">
      {children}
    </Button>
  );
}
