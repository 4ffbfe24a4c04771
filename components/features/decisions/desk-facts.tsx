import { DescriptionList } from "@/components/ui/data/description-list";
import { Fingerprint } from "@/components/ui/data/fingerprint";

interface DeskFactsProps {
  desk: {
    revision: {
      number: number;
      changeReason: string;
      intendedUse: string | null;
      touchesEmissionOrSafety: boolean | null;
      imageSha256: string;
    };
    authorName: string;
    submitterName: string | null;
    mayPromote: { ok: true; selfReleased?: boolean } | { ok: false; reason: string };
  };
}

const USE: Record<string, string> = {
  road: "road use where locally approved",
  closed_course: "closed course only",
  bench: "bench only",
};

/** What the revision says of itself, and who may sign. */
export function DeskFacts({ desk }: DeskFactsProps) {
  const { revision, authorName, submitterName, mayPromote } = desk;
  const who = mayPromote.ok
    ? mayPromote.selfReleased
      ? `You made R${revision.number} or asked for the decision, and no other lead is active: the record will say "self-released".`
      : `You neither made R${revision.number} nor asked for the decision. One lead's signature is needed.`
    : mayPromote.reason;
  return (
    <div className="flex flex-col gap-3">
      <DescriptionList
        items={[
          { term: "Change reason", description: revision.changeReason || "not written" },
          { term: "Intended use", description: USE[revision.intendedUse ?? ""] ?? "not stated" },
          {
            term: "Touches emission or safety functions",
            description:
              revision.touchesEmissionOrSafety === null
                ? "not answered"
                : revision.touchesEmissionOrSafety
                  ? "yes"
                  : "no",
          },
          { term: "Image", description: <Fingerprint value={revision.imageSha256} /> },
          { term: "Made by", description: authorName },
          { term: "Asked by", description: submitterName ?? "nobody yet" },
        ]}
      />
      <p className="text-13 text-ink2">{who}</p>
    </div>
  );
}
