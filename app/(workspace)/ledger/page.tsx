import type { Metadata, Route } from "next";
import { z } from "zod";
import { ChainNote } from "@/components/features/ledger/chain-note";
import { LedgerFilter } from "@/components/features/ledger/ledger-filter";
import { LedgerList } from "@/components/features/ledger/ledger-list";
import { LinkButton } from "@/components/ui/action/link-button";
import { Card } from "@/components/ui/layout/card";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { requireCtx } from "@/lib/auth/current";
import { orRefused, versionOf } from "@/lib/http/page";
import { readLedger } from "@/lib/services/ledger/read";
import { listProgrammes } from "@/lib/services/programmes/list";

export const metadata: Metadata = { title: "Ledger" };

const programmeSchema = z
  .union([z.uuid(), z.literal("").transform(() => undefined)])
  .optional()
  .catch(undefined);

export default async function LedgerPage({ searchParams }: PageProps<"/ledger">) {
  const ctx = await requireCtx();
  const query = await searchParams;
  const programmeId = programmeSchema.parse(query.programme);
  const beforeSeq = versionOf(query.before);
  const [{ entries, nextBeforeSeq, chain }, { programmes }] = await orRefused(() =>
    Promise.all([readLedger(ctx, { programmeId, beforeSeq }), listProgrammes(ctx)]),
  );
  const older = new URLSearchParams({
    ...(programmeId && { programme: programmeId }),
    before: String(nextBeforeSeq),
  });
  return (
    <div className="flex flex-col gap-6">
      <PageHeading
        title="Ledger"
        lead="Everything that happened in this workspace, in the order it happened. Entries are only ever added; nobody changes or removes one."
      />
      <div className="flex flex-wrap items-end justify-between gap-4">
        <ChainNote chain={chain} />
        <LedgerFilter
          programmes={programmes.map(({ id, name }) => ({ id, name }))}
          chosen={programmeId ?? ""}
        />
      </div>
      <Card flush>
        {entries.length === 0 ? (
          <p className="px-4 py-6 text-ink2 md:px-5">No entry here.</p>
        ) : (
          <LedgerList entries={entries} />
        )}
      </Card>
      <nav aria-label="Pages of the ledger" className="flex flex-wrap gap-2">
        {beforeSeq !== undefined && (
          <LinkButton href={(programmeId ? `/ledger?programme=${programmeId}` : "/ledger") as Route}>
            To the newest
          </LinkButton>
        )}
        {nextBeforeSeq !== null && <LinkButton href={`/ledger?${older}` as Route}>Older entries</LinkButton>}
      </nav>
    </div>
  );
}
