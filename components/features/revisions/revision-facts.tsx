import { INTENDED_USE_WORDS } from "@/components/features/revisions/words";
import { DateTime } from "@/components/ui/data/date-time";
import { DescriptionList } from "@/components/ui/data/description-list";

export interface RevisionFactsProps {
  authorName: string;
  createdAt: Date;
  parentId: string | null;
  /** Null without a parent, and for a reader where the parent was not released. */
  parentNumber: number | null;
  changeReason: string;
  intendedUse: string | null;
  touchesEmissionOrSafety: boolean | null;
  note: string;
  howRead: string | null;
}

const notSaid = "not said yet";

function madeFrom({ parentId, parentNumber }: Pick<RevisionFactsProps, "parentId" | "parentNumber">): string {
  if (parentNumber !== null) return `R${parentNumber}`;
  return parentId === null ? "no parent: the first image" : "a revision that was not released";
}

/** What the calibrator states of a revision. */
export function RevisionFacts(props: RevisionFactsProps) {
  const { touchesEmissionOrSafety: touches } = props;
  return (
    <DescriptionList
      items={[
        { term: "Why it was changed", description: props.changeReason || notSaid },
        {
          term: "Intended use",
          description: (props.intendedUse && INTENDED_USE_WORDS[props.intendedUse]) ?? notSaid,
        },
        {
          term: "Touches emission- or safety-relevant functions",
          description: touches === null ? notSaid : touches ? "yes" : "no",
        },
        {
          term: "Made from",
          description: madeFrom(props),
        },
        ...(props.howRead ? [{ term: "How it was read", description: props.howRead }] : []),
        ...(props.note
          ? [{ term: "Note", description: <span className="whitespace-pre-line">{props.note}</span> }]
          : []),
        {
          term: "Added",
          description: (
            <>
              <DateTime at={props.createdAt} zone="UTC" /> by {props.authorName}
            </>
          ),
        },
      ]}
    />
  );
}
