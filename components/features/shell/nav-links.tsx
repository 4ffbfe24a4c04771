"use client";

import Link from "next/link";
import { usePathname } from "next/navigation";
import type { ComponentProps } from "react";

export interface NavLink {
  label: string;
  href: ComponentProps<typeof Link>["href"];
  /** Paths that belong under this entry; default: its own. */
  under?: readonly string[];
}

/** The places of the workspace; the one we are in is marked by weight and a plum rule, not by colour alone. */
export function NavLinks({ links }: { links: readonly NavLink[] }) {
  const path = usePathname();
  return (
    <ul className="flex gap-x-1">
      {links.map((link) => {
        const roots = link.under ?? [String(link.href)];
        const here = roots.some((root) => path === root || path.startsWith(`${root}/`));
        return (
          <li key={link.label}>
            <Link
              href={link.href}
              aria-current={here ? "page" : undefined}
              className="relative inline-flex min-h-control items-center rounded px-2.5 text-15 text-ink2 hover:text-ink aria-[current]:font-semibold aria-[current]:text-ink aria-[current]:after:absolute aria-[current]:after:inset-x-2.5 aria-[current]:after:bottom-1 aria-[current]:after:h-[3px] aria-[current]:after:bg-action"
            >
              {link.label}
            </Link>
          </li>
        );
      })}
    </ul>
  );
}
