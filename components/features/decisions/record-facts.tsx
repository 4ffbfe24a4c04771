import Link from "next/link";
import { DescriptionList } from "@/components/ui/data/description-list";
import { Fingerprint } from "@/components/ui/data/fingerprint";
import { numberText } from "@/components/ui/data/number-text";

export interface RecordFactsProps {
  record: {
    decision: {
      evidence: {
        revision: {
          number: number;
          title: string;
          parentNumber: number | null;
          imageFileName: string;
          imageBytes: number;
          changeReason: string;
          intendedUse: string | null;
          touchesEmissionOrSafety: boolean | null;
        };
        imageSha256: string;
        standingImageSha256: string | null;
        analysisVersion: string | null;
        sheetVersion: number | null;
        leadsRequired: number;
      };
    };
    revision: { id: string };
    from: { id: string; number: number; title: string } | null;
  };
}

const answer = (value: boolean | null) => (value === null ? "not answered" : value ? "yes" : "no");

/** What the revision was when it was decided on. */
export function RecordFacts({ record }: RecordFactsProps) {
  const { evidence } = record.decision;
  const { revision } = evidence;
  return (
    <DescriptionList
      items={[
        {
          term: "Revision",
          description: (
            <Link href={`/revisions/${record.revision.id}`} className="link">
              R{revision.number} “{revision.title}”
            </Link>
          ),
        },
        {
          term: "Parent",
          description: revision.parentNumber === null ? "none" : `R${revision.parentNumber}`,
        },
        {
          term: "Image",
          description: `${revision.imageFileName}, ${numberText(revision.imageBytes)} bytes`,
        },
        { term: "Its fingerprint", description: <Fingerprint value={evidence.imageSha256} full /> },
        {
          term: "Stood before",
          description: record.from ? (
            <Link href={`/revisions/${record.from.id}`} className="link">
              R{record.from.number} “{record.from.title}”
            </Link>
          ) : (
            "none"
          ),
        },
        {
          term: "Its fingerprint",
          description: evidence.standingImageSha256 ? (
            <Fingerprint value={evidence.standingImageSha256} full />
          ) : (
            "–"
          ),
        },
        { term: "Change reason", description: revision.changeReason || "not written" },
        { term: "Intended use", description: revision.intendedUse?.replaceAll("_", " ") ?? "not stated" },
        {
          term: "Touches emission or safety functions",
          description: answer(revision.touchesEmissionOrSafety),
        },
        {
          term: "Analysis, vehicle sheet",
          description: evidence.analysisVersion
            ? `version ${evidence.analysisVersion}, sheet version ${evidence.sheetVersion}`
            : "no comparison",
        },
        { term: "Leads required", description: evidence.leadsRequired },
      ]}
    />
  );
}
