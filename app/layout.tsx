import type { Metadata, Viewport } from "next";
import { cookies } from "next/headers";
import type { ReactNode } from "react";
import { fontVariables } from "@/app/fonts";
import { DAYLIGHT_COOKIE, isTheme, THEME_COOKIE } from "@/components/features/shell/appearance";
import "@/app/globals.css";

export const metadata: Metadata = {
  title: { default: "Twinpass", template: "%s · Twinpass" },
  description:
    "Two passes, one decision: shows on the road what a calibration change did, and keeps the record.",
  applicationName: "Twinpass",
  robots: { index: false, follow: false },
  formatDetection: { telephone: false, date: false, address: false, email: false },
};

export const viewport: Viewport = { width: "device-width", initialScale: 1 };

export default async function RootLayout({ children }: { children: ReactNode }) {
  const jar = await cookies();
  const theme = jar.get(THEME_COOKIE)?.value;
  const daylight = jar.get(DAYLIGHT_COOKIE)?.value === "on";
  return (
    <html
      lang="en"
      className={fontVariables}
      data-theme={isTheme(theme) ? theme : "system"}
      data-daylight={daylight ? "on" : undefined}
    >
      <body>{children}</body>
    </html>
  );
}
