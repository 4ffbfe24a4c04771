import type { ReactNode } from "react";
import { AppShell } from "@/components/features/shell/app-shell";

/** The frame around signing in and accepting an invitation: no places, no person. */
export default function AccountLayout({ children }: { children: ReactNode }) {
  return <AppShell home="/sign-in">{children}</AppShell>;
}
