import { DateTime } from "@/components/ui/data/date-time";
import { Card } from "@/components/ui/layout/card";
import { SectionHeading } from "@/components/ui/layout/section-heading";

export interface LetterCardProps {
  letter: { to: string; subject: string; text: string; writtenAt: string };
}

const ADDRESS = /(https?:\/\/\S+)/;

/** A letter as its receiver would read it, with its addresses to be clicked. */
export function LetterCard({ letter }: LetterCardProps) {
  return (
    <Card>
      <SectionHeading
        className="mb-3"
        description={
          <>
            to {letter.to} · <DateTime at={letter.writtenAt} zone="UTC" precision="second" />
          </>
        }
      >
        {letter.subject}
      </SectionHeading>
      <p className="max-w-prose whitespace-pre-line break-words text-15">
        {letter.text.split(ADDRESS).map((part, index) =>
          ADDRESS.test(part) ? (
            // biome-ignore lint/suspicious/noArrayIndexKey: pieces of one fixed text
            <a key={index} href={part} className="link break-all">
              {part}
            </a>
          ) : (
            part
          ),
        )}
      </p>
    </Card>
  );
}
