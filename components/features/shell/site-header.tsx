import Link from "next/link";
import type { ComponentProps, ReactNode } from "react";
import { Wordmark } from "@/components/features/shell/mark";
import { type NavLink, NavLinks } from "@/components/features/shell/nav-links";

export interface SiteHeaderProps {
  /** Where the name leads. */
  home: ComponentProps<typeof Link>["href"];
  links?: readonly NavLink[];
  /** Name of the workspace, or a control to change it. */
  workspace?: ReactNode;
  /** Things that must stay in sight, e.g. what waits to be sent. */
  status?: ReactNode;
  /** Menu of the person signed in, or a link to sign in. */
  person?: ReactNode;
}

/** One line at a desk; on a phone the places go to a second line that can be swiped. */
export function SiteHeader({ home, links, workspace, status, person }: SiteHeaderProps) {
  return (
    <header className="border-line border-b bg-paper print:border-0">
      <div className="mx-auto flex max-w-page flex-wrap items-center gap-x-5 px-4 md:flex-nowrap md:px-8">
        <Link href={home} aria-label="Twinpass, start" className="flex min-h-14 items-center rounded">
          <Wordmark />
        </Link>
        {workspace && (
          <div className="hidden min-w-0 items-center border-line border-l pl-5 text-15 text-ink2 sm:flex">
            {workspace}
          </div>
        )}
        <div className="no-print ml-auto flex items-center gap-x-2 md:order-3">
          {status}
          {person}
        </div>
        {links && links.length > 0 && (
          <nav
            aria-label="Main"
            className="no-print -mx-4 w-screen overflow-x-auto border-line border-t px-2 md:order-2 md:mx-0 md:w-auto md:border-0 md:px-0"
          >
            <NavLinks links={links} />
          </nav>
        )}
      </div>
    </header>
  );
}
