import Link from "next/link";
import type { Theme } from "@/components/features/shell/appearance";
import { ThemeSwitch } from "@/components/features/shell/theme-switch";

/** What is true on every page: where the figures come from, what they are not, and the colours of the pages. */
export function SiteFooter({ theme }: { theme: Theme }) {
  return (
    <footer className="mt-auto border-line border-t text-13 text-ink2 print:border-0">
      <div className="mx-auto flex max-w-page flex-wrap items-center gap-x-6 gap-y-3 px-4 py-4 md:px-8">
        <p className="max-w-prose basis-full md:mr-auto md:basis-auto">
          Figures are comparisons under stated assumptions. Twinpass measures and records; it approves nothing
          in law.
        </p>
        <nav aria-label="About" className="no-print flex items-center gap-x-4">
          <Link href="/methods" className="link inline-flex min-h-6 items-center">
            Methods
          </Link>
          <Link href="/cautions" className="link inline-flex min-h-6 items-center">
            Cautions
          </Link>
        </nav>
        <ThemeSwitch initial={theme} />
      </div>
    </footer>
  );
}
