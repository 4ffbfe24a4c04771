import { LogOut, Settings2 } from "lucide-react";
import Link from "next/link";
import { Menu, menuEntry } from "@/components/ui/action/menu";

export interface PersonMenuProps {
  name: string;
  /** Roles in the workspace that is looked at, e.g. "lead, tester"; null outside any. */
  roles: string | null;
  /** Entries above: workspaces on a narrow screen. */
  children?: React.ReactNode;
}

function initials(name: string): string {
  const parts = name.split(/[\s@]+/).filter(Boolean);
  return [parts.at(0), parts.length > 1 ? parts.at(-1) : undefined]
    .map((part) => part?.[0]?.toUpperCase() ?? "")
    .join("");
}

/** Who is signed in, with the way to the account and out. Signing out is a plain form: it works without script. */
export function PersonMenu({ name, roles, children }: PersonMenuProps) {
  const label = (
    <>
      <span
        aria-hidden
        className="tabular flex size-8 items-center justify-center rounded-full border border-edge bg-surface font-semibold text-13"
      >
        {initials(name)}
      </span>
      <span className="hidden max-w-40 truncate lg:inline">{name}</span>
    </>
  );
  return (
    <Menu label={label} name={`Account of ${name}`}>
      <div className="border-line border-b px-3 pt-2 pb-3">
        <p className="font-semibold">{name}</p>
        {roles && <p className="text-13 text-ink2">{roles}</p>}
      </div>
      {children}
      <Link href="/account" className={menuEntry}>
        <Settings2 aria-hidden size={16} /> Account and passphrase
      </Link>
      <form action="/sign-out" method="post">
        <button type="submit" className={menuEntry}>
          <LogOut aria-hidden size={16} /> Sign out
        </button>
      </form>
    </Menu>
  );
}
