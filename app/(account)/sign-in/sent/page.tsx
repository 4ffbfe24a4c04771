import type { Metadata } from "next";
import Link from "next/link";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { Notice } from "@/components/ui/status/notice";
import { env } from "@/lib/env";

export const metadata: Metadata = { title: "Look into your mail" };

export default function LinkSentPage() {
  const showsFolder = env().DEMO_MODE && env().SMTP_URL === undefined;
  return (
    <div className="flex max-w-prose flex-col gap-6 py-8">
      <PageHeading
        title="Look into your mail"
        lead="If the address can receive mail, a link is on its way to it. Open it within ten minutes and press the button there. It works once."
      />
      {showsFolder && (
        <Notice title="This is a demo: no mail leaves this machine">
          The letter lies in the{" "}
          <Link href="/demo/mail" className="link">
            mail folder
          </Link>
          .
        </Notice>
      )}
      <p className="text-15 text-ink2">
        Nothing there after a minute? Look among the unwanted mail, or{" "}
        <Link href="/sign-in" className="link">
          ask again
        </Link>
        .
      </p>
    </div>
  );
}
