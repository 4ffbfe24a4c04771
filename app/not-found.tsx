import type { Metadata } from "next";
import { AppShell } from "@/components/features/shell/app-shell";
import { LinkButton } from "@/components/ui/action/link-button";
import { PageHeading } from "@/components/ui/layout/page-heading";

export const metadata: Metadata = { title: "Nothing here" };

/** Also the answer to what exists but belongs to another workspace: the two are never told apart. */
export default function NotFound() {
  return (
    <AppShell>
      <div className="flex flex-col items-start gap-6 py-8">
        <PageHeading
          title="Nothing here"
          lead="There is no such page, or it belongs to a workspace that you are not a member of. Check the address, or ask whoever sent you the link."
        />
        <LinkButton href="/" look="filled">
          To the start
        </LinkButton>
      </div>
    </AppShell>
  );
}
