import type { Metadata } from "next";
import Link from "next/link";
import { notFound } from "next/navigation";
import { AppShell } from "@/components/features/shell/app-shell";
import { Card } from "@/components/ui/layout/card";
import { Disclosure } from "@/components/ui/layout/disclosure";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { Notice } from "@/components/ui/status/notice";
import { DEMO_PASSPHRASE } from "@/lib/demo";
import { sampleRuns } from "@/lib/demo-samples";
import { env } from "@/lib/env";

export const metadata: Metadata = { title: "The demo" };
export const dynamic = "force-dynamic";

const LOOP = [
  <>
    <strong>Decide as the lead.</strong> Sign in as Ana. R4 waits for a decision: look at its comparison with
    the image that stands, read the gates, and promote it, hold it or turn it down.
  </>,
  <>
    <strong>Add a revision as the calibrator.</strong> Sign in as Mia, open the programme and add the image
    below, made from R4, with the description of its parent. Read what was understood of it, add it as a
    draft, and start validating.
  </>,
  <>
    <strong>Drive as the tester.</strong> Sign in as Sam, open a new road day, confirm its checklist, and drop
    the sixteen runs. Their order is that of the order card for four twins a side; files named "standing"
    belong to the revision that stands, those named "R5" to the new one. Each gets its verdict at once. Then
    ask for a decision.
  </>,
  <>
    <strong>Decide again as the lead</strong>, then roll back, and read in the ledger who did what and when.
  </>,
];

/** What to try in the demo and the files for it. Absent outside the demo. */
export default function DemoPage() {
  if (!env().DEMO_MODE) notFound();
  return (
    <AppShell>
      <div className="flex flex-col gap-6">
        <PageHeading
          title="Walk the whole loop"
          lead="An invented workshop with invented people and one invented car. Everything in it was made with the product's own steps; nothing is a picture."
        />
        <Card title="In ten minutes">
          <ol className="flex max-w-prose list-decimal flex-col gap-3 pl-5">
            {LOOP.map((step, index) => (
              // biome-ignore lint/suspicious/noArrayIndexKey: a fixed list of sentences
              <li key={index}>{step}</li>
            ))}
          </ol>
          <p className="mt-4">
            <Link className="link" href="/sign-in">
              Choose a person and sign in
            </Link>
          </p>
        </Card>
        <div className="grid gap-6 lg:grid-cols-2">
          <Card title="Files to try it with" description="Simulated on the invented car; sample data.">
            <ul className="flex flex-col gap-2">
              <li>
                <a className="link" href="/samples/R5-full-curve.hex" download>
                  R5-full-curve.hex
                </a>{" "}
                the new image, Intel HEX
              </li>
              <li>
                <a className="link" href="/samples/marlin-sample.a2l" download>
                  marlin-sample.a2l
                </a>{" "}
                what lies in the image, A2L; the earlier revisions have it already
              </li>
              <li>
                <a className="link" href="/samples/road-day.zip" download>
                  road-day.zip
                </a>{" "}
                all sixteen runs; unpack it, then drop the files
              </li>
            </ul>
            <Disclosure summary="The runs one by one" className="mt-2">
              <ul className="flex flex-col gap-1">
                {sampleRuns().map((name) => (
                  <li key={name}>
                    <a className="link tabular" href={`/samples/${name}`} download>
                      {name}
                    </a>
                  </li>
                ))}
              </ul>
            </Disclosure>
          </Card>
          <Card title="Signing">
            <p>Decisions ask for the lead's signing passphrase. Every demo person has the same one:</p>
            <p className="tabular my-3 text-17">
              <strong>{DEMO_PASSPHRASE}</strong>
            </p>
            <p>
              Mails that the product sends are shown on the{" "}
              <Link className="link" href="/demo/mail">
                mail page
              </Link>{" "}
              instead of leaving this machine.
            </p>
          </Card>
        </div>
        <Notice tone="caution">
          Measure on a closed course or proving ground. Twinpass measures and records; it approves nothing in
          law. The{" "}
          <Link className="link" href="/cautions">
            cautions
          </Link>{" "}
          say what can go wrong.
        </Notice>
      </div>
    </AppShell>
  );
}
