import { LinkButton } from "@/components/ui/action/link-button";
import { PageHeading } from "@/components/ui/layout/page-heading";

/** Also the answer to what exists but belongs to another workspace: the two are never told apart. */
export default function NotFound() {
  return (
    <div className="flex flex-col items-start gap-6 py-8">
      <PageHeading
        title="Nothing here"
        lead="There is no such thing in this workspace. Check the address, or look into another workspace of yours if the link came from there."
      />
      <LinkButton href="/programmes" look="filled">
        To the programmes
      </LinkButton>
    </div>
  );
}
