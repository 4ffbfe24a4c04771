import type { Metadata, Viewport } from "next";
import type { ReactNode } from "react";
import { fontVariables } from "@/app/fonts";
import { readAppearance } from "@/components/features/shell/read-appearance";
import { ToastRegion } from "@/components/ui/status/toast";
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
  const { theme, daylight } = await readAppearance();
  return (
    <html
      lang="en"
      className={fontVariables}
      data-theme={theme}
      data-daylight={daylight ? "on" : undefined}
      // Extensions and the theme switch write here before React looks.
      suppressHydrationWarning
    >
      <body>
        {children}
        <ToastRegion />
      </body>
    </html>
  );
}
