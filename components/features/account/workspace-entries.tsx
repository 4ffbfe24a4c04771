import { Check, Plus } from "lucide-react";
import Link from "next/link";
import { menuEntry } from "@/components/ui/action/menu";

export interface WorkspaceEntriesProps {
  workspaces: readonly { id: string; name: string; sample: boolean }[];
  activeId: string | null;
  switchAction: (form: FormData) => Promise<void>;
}

/** The person's workspaces as entries of a menu; the one that is looked at is ticked. */
export function WorkspaceEntries({ workspaces, activeId, switchAction }: WorkspaceEntriesProps) {
  return (
    <>
      {workspaces.map((workspace) => {
        const active = workspace.id === activeId;
        return (
          <form key={workspace.id} action={switchAction}>
            <input type="hidden" name="workspaceId" value={workspace.id} />
            <button type="submit" aria-current={active || undefined} className={menuEntry}>
              <Check aria-hidden size={16} className={active ? "" : "invisible"} />
              <span className="min-w-0 truncate">{workspace.name}</span>
              {workspace.sample && <span className="ml-auto pl-3 text-13 text-ink2">sample</span>}
            </button>
          </form>
        );
      })}
      <Link href="/workspaces/new" className={menuEntry}>
        <Plus aria-hidden size={16} /> New workspace
      </Link>
    </>
  );
}
