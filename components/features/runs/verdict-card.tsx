import { spanHash } from "@/components/charts/stack/span-hash";
import { TRACES_ANCHOR } from "@/components/features/runs/traces-anchor";
import { ConsequenceMark, VerdictMark } from "@/components/features/runs/verdict-mark";
import { numberText } from "@/components/ui/data/number-text";
import { Card } from "@/components/ui/layout/card";
import { Notice } from "@/components/ui/status/notice";
import { CONSEQUENCES, findingsOf } from "@/lib/measure/judge/consequence";
import type { Consequence, Note } from "@/lib/measure/types";

export interface VerdictCardProps {
  verdict: "waiting" | "usable" | "refused";
  reasons: readonly Note[];
  notes: readonly Note[];
  next: string | null;
  /** Set when the run is set aside: who, when, why, and whether its result could be seen then. */
  setAside: { by: string; at: string; reason: string; resultWasVisible: boolean } | null;
  /** Whether the page draws traces that a finding's span can be looked at in. */
  hasTraces?: boolean;
}

const MEANING: Readonly<Record<Consequence, string>> = {
  refused: "the run is not used",
  masked: "these parts are not in the figures",
  warned: "in the figures; look before relying on them",
};

const seconds = (value: number) => numberText(value, { decimals: 2 });

function spanText(fromS: number, toS: number | undefined): string {
  return toS === undefined || toS === fromS
    ? `${seconds(fromS)} s`
    : `${seconds(fromS)} to ${seconds(toS)} s`;
}

/** Where a finding lies: a link that zooms the traces to it, where there are traces. */
function Where({ note: { from_s, to_s }, linked }: { note: Note; linked: boolean }) {
  if (from_s === undefined) return <span className="text-ink2">whole log</span>;
  const text = spanText(from_s, to_s);
  if (!linked) return <span className="tabular">{text}</span>;
  return (
    <a
      href={spanHash(TRACES_ANCHOR, from_s, to_s ?? from_s)}
      className="link tabular inline-flex min-h-11 items-center sm:min-h-6"
    >
      <span className="sr-only">Show in the traces: </span>
      {text}
    </a>
  );
}

function Findings({
  consequence,
  findings,
  linked,
}: {
  consequence: Consequence;
  findings: readonly Note[];
  linked: boolean;
}) {
  const heading = `findings-${consequence}`;
  return (
    <section aria-labelledby={heading} className="flex flex-col gap-1">
      <h3 id={heading} className="flex flex-wrap items-baseline gap-x-2">
        <ConsequenceMark consequence={consequence} />
        <span className="text-13 text-ink2">{MEANING[consequence]}</span>
      </h3>
      <ul className="flex flex-col">
        {findings.map((note) => (
          <li
            key={`${note.code}${note.from_s ?? ""}${note.message}`}
            className="flex flex-col gap-x-3 border-line border-t py-2 first:border-t-0"
          >
            <span>{note.message}</span>
            <span className="flex flex-wrap items-center gap-x-3 text-15">
              <Where note={note} linked={linked} />
              <code className="tabular text-13 text-ink2">{note.code}</code>
            </span>
          </li>
        ))}
      </ul>
    </section>
  );
}

/** Whether the run can be used, and everything that was found in it: what refuses it first, then what is left out, then warnings. */
export function VerdictCard({
  verdict,
  reasons,
  notes,
  next,
  setAside,
  hasTraces = false,
}: VerdictCardProps) {
  const findings = findingsOf({ usable: verdict !== "refused", reasons: [...reasons], notes: [...notes] });
  return (
    <Card title="Verdict" id="verdict">
      <div className="flex flex-col gap-4">
        <p className="flex flex-wrap items-center gap-3 text-17">
          <VerdictMark verdict={verdict} setAside={false} />
          {setAside && <VerdictMark verdict={verdict} setAside />}
        </p>
        {setAside && (
          <Notice tone="caution" title={`Set aside by ${setAside.by}, ${setAside.at}`}>
            <p>{setAside.reason}</p>
            <p>
              {setAside.resultWasVisible
                ? "Its result could be seen then."
                : "Its result could not be seen yet then."}{" "}
              It counts in no comparison and stays listed.
            </p>
          </Notice>
        )}
        {verdict === "waiting" && (
          <p>The log is kept. The worker reads and analyses it; this page follows by itself.</p>
        )}
        {next && (
          <p>
            <strong>Next: </strong>
            {next}
          </p>
        )}
        {CONSEQUENCES.map((consequence) => {
          const own = findings.filter((note) => note.consequence === consequence);
          return (
            own.length > 0 && (
              <Findings key={consequence} consequence={consequence} findings={own} linked={hasTraces} />
            )
          );
        })}
        {verdict === "usable" && findings.length === 0 && (
          <p className="text-ink2">Nothing was found against this run, and nothing left out.</p>
        )}
      </div>
    </Card>
  );
}
