"use client";

import { Check, Copy } from "lucide-react";
import { useEffect, useState } from "react";

/** Copies `value`; says so to eye and ear for two seconds. `label` names what is copied, e.g. "fingerprint". */
export function CopyButton({ value, label }: { value: string; label: string }) {
  const [outcome, setOutcome] = useState<"copied" | "refused" | null>(null);

  useEffect(() => {
    if (outcome === null) return;
    const timer = setTimeout(() => setOutcome(null), 2000);
    return () => clearTimeout(timer);
  }, [outcome]);

  const copy = async () => {
    try {
      await navigator.clipboard.writeText(value);
      setOutcome("copied");
    } catch {
      // No clipboard outside a secure context; the full value stays readable in the title.
      setOutcome("refused");
    }
  };

  return (
    <>
      <button
        type="button"
        onClick={copy}
        aria-label={`Copy ${label}`}
        className="no-print inline-flex size-6 items-center justify-center rounded text-ink2 hover:bg-sunk hover:text-ink"
      >
        {outcome === "copied" ? <Check aria-hidden size={14} /> : <Copy aria-hidden size={14} />}
      </button>
      <span role="status" className="sr-only">
        {outcome === "copied" && "Copied."}
        {outcome === "refused" && "Copying is not allowed here. Select the text instead."}
      </span>
    </>
  );
}
