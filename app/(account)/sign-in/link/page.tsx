import type { Metadata } from "next";
import Link from "next/link";
import { z } from "zod";
import { consumeLinkAction } from "@/app/(account)/sign-in/actions";
import { UseLinkForm } from "@/components/features/sign-in/use-link-form";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { Notice } from "@/components/ui/status/notice";
import { wasAskedHere } from "@/lib/auth/link";
import { emailAddress } from "@/lib/services/members/schema";

export const metadata: Metadata = { title: "Sign in by link", referrer: "no-referrer" };

const linkSchema = z.object({ email: emailAddress, token: z.string().min(1).max(200) });

/** Where the mailed link leads. Opening it uses nothing up, so that a mail scanner can't; the button does. */
export default async function SignInLinkPage({ searchParams }: PageProps<"/sign-in/link">) {
  const link = linkSchema.safeParse(await searchParams);
  if (!link.success) {
    return (
      <div className="flex max-w-prose flex-col gap-6 py-8">
        <PageHeading
          title="This link is not complete"
          lead="Copy it whole from the mail, from https or http to its end, or ask for a new one."
        />
        <p>
          <Link href="/sign-in" className="link">
            Ask for a new link
          </Link>
        </p>
      </div>
    );
  }
  const askedHere = await wasAskedHere();
  return (
    <div className="flex max-w-prose flex-col gap-6 py-8">
      <PageHeading
        title="Sign in"
        lead={
          <>
            This link belongs to <strong className="break-all text-ink">{link.data.email}</strong>. It is used
            up when you press the button, not before.
          </>
        }
      />
      {askedHere ? (
        <Notice>It was asked for in this browser within the last ten minutes.</Notice>
      ) : (
        <Notice tone="caution" title="It was not asked for in this browser">
          That is fine when you asked for it on another device. If you did not ask for it at all, close this
          page: whoever did must not be signed in by you.
        </Notice>
      )}
      <UseLinkForm {...link.data} action={consumeLinkAction} />
    </div>
  );
}
