import Link from "next/link";
import type { ComponentProps } from "react";

export interface Crumb {
  label: string;
  /** Absent on the last one: the page itself. */
  href?: ComponentProps<typeof Link>["href"];
}

/** The way down to this page. */
export function Breadcrumbs({ items }: { items: readonly Crumb[] }) {
  return (
    <nav aria-label="Breadcrumb" className="no-print text-15 text-ink2">
      <ol className="flex flex-wrap items-center gap-x-2">
        {items.map((item, index) => (
          <li key={item.label} className="flex items-center gap-x-2">
            {index > 0 && (
              <span aria-hidden className="text-edge">
                /
              </span>
            )}
            {item.href ? (
              <Link
                href={item.href}
                className="inline-flex min-h-6 items-center hover:text-ink hover:underline"
              >
                {item.label}
              </Link>
            ) : (
              <span aria-current="page">{item.label}</span>
            )}
          </li>
        ))}
      </ol>
    </nav>
  );
}
