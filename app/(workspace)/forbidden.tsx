import { LinkButton } from "@/components/ui/action/link-button";
import { PageHeading } from "@/components/ui/layout/page-heading";

/** The answer (403) where the policy refuses a page of one's own workspace. */
export default function Forbidden() {
  return (
    <div className="flex flex-col items-start gap-6 py-8">
      <PageHeading
        title="Not for your role"
        lead="This page takes another role, or it was not shared with you. The list of members shows who holds which role; an admin can change it."
      />
      <div className="flex flex-wrap gap-2">
        <LinkButton href="/programmes" look="filled">
          To the programmes
        </LinkButton>
        <LinkButton href="/members">Members</LinkButton>
      </div>
    </div>
  );
}
