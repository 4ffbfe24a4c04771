import type { ReactNode } from "react";
import { switchWorkspaceAction } from "@/app/(workspace)/workspaces/actions";
import { PersonMenu } from "@/components/features/account/person-menu";
import { WorkspaceEntries } from "@/components/features/account/workspace-entries";
import { AppShell } from "@/components/features/shell/app-shell";
import { Menu } from "@/components/ui/action/menu";
import { requirePerson } from "@/lib/auth/current";
import { env } from "@/lib/env";
import { can } from "@/lib/policy/can";

/** The frame of everything behind a session. It guards nothing: each page asks for its own context. */
export default async function WorkspaceLayout({ children }: { children: ReactNode }) {
  const person = await requirePerson();
  const { memberships, activeWorkspaceId, name } = person;
  const active = memberships.find((membership) => membership.workspaceId === activeWorkspaceId);
  const actor = active && { userId: person.id, roles: active.roles };
  const links = actor
    ? [
        {
          label: "Programmes",
          href: "/programmes" as const,
          under: ["/programmes", "/revisions", "/road-days", "/runs", "/comparisons", "/records"],
        },
        ...(can(actor, "ledger.view").ok ? [{ label: "Ledger", href: "/ledger" as const }] : []),
        { label: "Members", href: "/members" as const },
        ...(env().DEMO_MODE ? [{ label: "Demo guide", href: "/demo" as const }] : []),
      ]
    : [];
  const entries = (
    <WorkspaceEntries
      workspaces={memberships.map(({ workspaceId, workspaceName, sample }) => ({
        ...{ id: workspaceId, name: workspaceName, sample },
      }))}
      activeId={activeWorkspaceId}
      switchAction={switchWorkspaceAction}
    />
  );
  return (
    <AppShell
      home="/programmes"
      links={links}
      workspace={
        active && (
          <Menu
            label={<span className="max-w-56 truncate">{active.workspaceName}</span>}
            name={`Workspace ${active.workspaceName}`}
            align="left"
          >
            {entries}
          </Menu>
        )
      }
      person={
        <PersonMenu name={name} roles={active ? active.roles.join(", ") : null}>
          <div className="border-line border-b sm:hidden">{entries}</div>
        </PersonMenu>
      }
    >
      {children}
    </AppShell>
  );
}
