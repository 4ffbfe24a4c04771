"use client";

import { useEffect } from "react";
import { Wordmark } from "@/components/features/shell/mark";
import { Button } from "@/components/ui/action/button";

export interface FailureProps {
  error: unknown;
  retry: () => void;
}

/** What stands where a page could not be made: what happened, what to do, and the number to quote. */
export function Failure({ error, retry }: FailureProps) {
  useEffect(() => {
    console.error(error);
  }, [error]);
  const digest =
    error instanceof Error && "digest" in error && typeof error.digest === "string" ? error.digest : null;
  return (
    <main className="mx-auto flex max-w-page flex-col items-start gap-6 px-4 py-12 md:px-8">
      {/* A full load on purpose: the router may be what failed. */}
      <a href="/" aria-label="Twinpass, start">
        <Wordmark />
      </a>
      <div className="flex max-w-prose flex-col gap-2">
        <h1 className="font-bold text-26 md:text-34">This page could not be shown</h1>
        <p className="text-17">
          Something failed while it was being made. Nothing you sent before was lost: what was acknowledged is
          kept. Try again; if it fails again, tell an admin of your workspace.
        </p>
        {digest && (
          <p className="text-15 text-ink2">
            Number to quote: <code className="tabular">{digest}</code>
          </p>
        )}
      </div>
      <Button look="filled" onClick={retry}>
        Try again
      </Button>
    </main>
  );
}
