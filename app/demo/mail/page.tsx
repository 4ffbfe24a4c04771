import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { LetterCard } from "@/components/features/account/letter-card";
import { AppShell } from "@/components/features/shell/app-shell";
import { Breadcrumbs } from "@/components/ui/layout/breadcrumbs";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { EmptyState } from "@/components/ui/status/empty-state";
import { env } from "@/lib/env";
import { readMailFolder } from "@/lib/mail/read-folder";

export const metadata: Metadata = { title: "Mail folder" };
export const dynamic = "force-dynamic";

const SHOWN = 30;

/** The letters that the demo wrote instead of sending. Absent outside the demo: a letter is a key. */
export default async function MailFolderPage() {
  if (!env().DEMO_MODE) notFound();
  const letters = await readMailFolder(SHOWN);
  return (
    <AppShell>
      <div className="flex flex-col gap-6">
        <PageHeading
          above={<Breadcrumbs items={[{ label: "The demo", href: "/demo" }, { label: "Mail folder" }]} />}
          title="Mail folder"
          lead="The demo sends no mail: it writes each letter into a folder, and this page shows the newest. It takes a few seconds from the button to the letter."
        />
        {letters.length === 0 ? (
          <EmptyState sentence="No letter yet. Ask for a sign-in link, then load this page again." />
        ) : (
          <ul className="flex flex-col gap-4">
            {letters.map((letter) => (
              <li key={letter.id}>
                <LetterCard letter={letter} />
              </li>
            ))}
          </ul>
        )}
      </div>
    </AppShell>
  );
}
