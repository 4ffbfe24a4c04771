import type { Metadata } from "next";
import { createWorkspaceAction } from "@/app/(workspace)/workspaces/actions";
import { NewWorkspaceForm } from "@/components/features/account/new-workspace-form";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { requirePerson } from "@/lib/auth/current";

export const metadata: Metadata = { title: "New workspace" };

export default async function NewWorkspacePage() {
  const person = await requirePerson();
  return (
    <div className="flex flex-col gap-8">
      <PageHeading
        title="New workspace"
        lead="A workspace is one workshop with its people, programmes and ledger. Who makes it holds every role and can invite others. Nothing in it can be seen from another workspace."
      />
      <NewWorkspaceForm asksName={!person.hasName} action={createWorkspaceAction} />
    </div>
  );
}
