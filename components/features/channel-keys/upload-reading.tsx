"use client";

import { useQuery } from "@tanstack/react-query";
import { Button } from "@/components/ui/action/button";
import { numberText } from "@/components/ui/data/number-text";
import { callApi } from "@/lib/client/api";
import type { FittingKey, UploadReading } from "@/lib/services/channel-keys/schema";

type Found = NonNullable<UploadReading["withKey"]>;

/** "12 columns, 50 rows a second; engine speed, GPS speed; left out: Sats." */
function readingWords({ columnCount, rateHz, found, leftOut }: Found): string {
  const rate =
    rateHz === null ? "" : `, ${numberText(rateHz, { decimals: rateHz < 10 ? 1 : 0 })} rows a second`;
  const names = found.length === 0 ? "no channel understood" : found.join(", ");
  const rest = leftOut.length === 0 ? "nothing left out" : `left out: ${leftOut.join(", ")}`;
  return `${columnCount} columns${rate}; ${names}; ${rest}.`;
}

export interface UploadReadingLineProps {
  uploadId: string;
  roadDayId: string;
  fileName: string;
  /** Id of the key that the log is to be read with; null: none. */
  usedKeyId: string | null;
  onUse: (key: FittingKey | null) => void;
}

/** What the reader understood of a sent log, beside its fields, and the saved key that fits it. */
export function UploadReadingLine(props: UploadReadingLineProps) {
  const { uploadId, roadDayId, fileName, usedKeyId, onUse } = props;
  const { data, error } = useQuery({
    queryKey: ["upload-reading", uploadId],
    queryFn: ({ signal }) =>
      callApi<UploadReading>(`/api/uploads/${uploadId}/reading?roadDay=${roadDayId}`, { signal }),
    staleTime: Number.POSITIVE_INFINITY,
  });
  if (error)
    return <p className="text-15 text-ink2">What the log holds could not be looked at: {error.message}</p>;
  if (!data) return <p className="text-15 text-ink2">Reading the columns …</p>;
  const { fitting } = data;
  const isUsed = fitting !== null && fitting.id === usedKeyId;
  const shown: Found = (isUsed && data.withKey) || data;
  return (
    <div className="flex flex-col gap-2" role="status">
      {shown.columnCount > 0 && <p className="text-15">{readingWords(shown)}</p>}
      {shown.inDoubt.length > 0 && (
        <details className="text-15 text-thin">
          <summary className="min-h-11 cursor-pointer py-2.5 sm:min-h-6 sm:py-0">
            In doubt: {shown.inDoubt[0]}
            {shown.inDoubt.length > 1 && ` And ${shown.inDoubt.length - 1} more.`}
          </summary>
          <ul className="flex list-disc flex-col gap-1 pl-5">
            {shown.inDoubt.slice(1).map((sentence) => (
              <li key={sentence}>{sentence}</li>
            ))}
          </ul>
        </details>
      )}
      {fitting ? (
        <p className="flex flex-wrap items-center gap-3 text-15">
          <span>
            Key “{fitting.name}” v{fitting.version} {isUsed ? "is used." : "fits."}
          </span>
          <Button
            size="compact"
            aria-label={`${isUsed ? "Do not use" : "Use"} key ${fitting.name} for ${fileName}`}
            onClick={() => onUse(isUsed ? null : fitting)}
          >
            {isUsed ? "Do not use it" : "Use it"}
          </Button>
        </p>
      ) : (
        shown.inDoubt.length > 0 && (
          <p className="text-13 text-ink2">
            Attach it, then choose its columns on the page of the run; the run is judged again with them.
          </p>
        )
      )}
    </div>
  );
}
