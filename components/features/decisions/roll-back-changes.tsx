import { addressText } from "@/components/ui/data/address-text";
import { Fingerprint } from "@/components/ui/data/fingerprint";
import { counted, numberText } from "@/components/ui/data/number-text";
import { Table } from "@/components/ui/data/table";
import { Notice } from "@/components/ui/status/notice";

export interface RollBackChangesProps {
  preview: {
    target: { number: number; imageSha256: string };
    difference:
      | { ranges: number; bytes: number; first: { address: number; length: number }[] }
      | { failure: string };
    sameBytes: boolean;
  };
}

/** Bytes that would change back, by address. */
export function RollBackChanges({ preview }: RollBackChangesProps) {
  const { difference, target, sameBytes } = preview;
  return (
    <div className="flex flex-col gap-4">
      <p className="text-15">
        R{target.number} stands then, with the image of fingerprint <Fingerprint value={target.imageSha256} />
        . Load it into the car and prove the load; Twinpass does not write control units.
      </p>
      {"failure" in difference ? (
        <Notice tone="caution" title="The images can't be compared">
          {difference.failure} Rolling back stays possible.
        </Notice>
      ) : (
        <>
          <p className="text-15">
            {sameBytes
              ? "Both revisions have the same file, byte for byte."
              : difference.bytes === 0
                ? "Both images hold the same bytes at the same addresses; only their files differ."
                : `${counted(difference.bytes, "byte")} in ${counted(difference.ranges, "place")} ${difference.bytes === 1 ? "differs" : "differ"}.`}
          </p>
          {difference.first.length > 0 && (
            <Table
              caption={
                difference.ranges > difference.first.length
                  ? `Where the images differ, the first ${difference.first.length} of ${difference.ranges} places`
                  : "Where the images differ"
              }
              showCaption
              dense
              scroll="short"
              rows={difference.first}
              rowKey={(range) => String(range.address)}
              columns={[
                {
                  key: "address",
                  header: "Address",
                  rowHeader: true,
                  className: "tabular",
                  cell: (range) => addressText(range.address),
                },
                { key: "length", header: "Bytes", numeric: true, cell: (range) => numberText(range.length) },
              ]}
            />
          )}
        </>
      )}
    </div>
  );
}
