"use client";

import { fontVariables } from "@/app/fonts";
import { Failure, type FailureProps } from "@/components/features/shell/failure";
import "@/app/globals.css";

/** Stands in for the root layout when that itself failed, so it brings its own html and body. */
export default function GlobalError(props: FailureProps) {
  return (
    <html lang="en" className={fontVariables}>
      <body>
        <title>This page could not be shown · Twinpass</title>
        <Failure {...props} />
      </body>
    </html>
  );
}
