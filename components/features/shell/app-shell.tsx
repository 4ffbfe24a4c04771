import type { ReactNode } from "react";
import { readAppearance } from "@/components/features/shell/read-appearance";
import { SiteFooter } from "@/components/features/shell/site-footer";
import { SiteHeader, type SiteHeaderProps } from "@/components/features/shell/site-header";
import { MAIN_ID, SkipLink } from "@/components/features/shell/skip-link";

export interface AppShellProps extends Omit<SiteHeaderProps, "home"> {
  /** Where the name leads; default "/". */
  home?: SiteHeaderProps["home"];
  children: ReactNode;
}

/** Header, content and footer of every page with a face. The content column is at most 1240 px wide. */
export async function AppShell({ home = "/", children, ...header }: AppShellProps) {
  const { theme } = await readAppearance();
  return (
    <div className="flex min-h-dvh flex-col">
      <SkipLink />
      <SiteHeader home={home} {...header} />
      <main
        id={MAIN_ID}
        tabIndex={-1}
        className="mx-auto w-full max-w-page px-4 py-6 outline-none md:px-8 md:py-8 print:p-0"
      >
        {children}
      </main>
      <SiteFooter theme={theme} />
    </div>
  );
}
