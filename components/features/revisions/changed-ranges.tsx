import { addressText } from "@/components/ui/data/address-text";
import { counted } from "@/components/ui/data/number-text";
import { Table } from "@/components/ui/data/table";
import type { ImageDifference } from "@/lib/calibration/image/image-summary";

/** Where two images differ, as address ranges: what can be said without a description. */
export function ChangedRanges({
  difference,
  parentNumber,
}: {
  difference: ImageDifference;
  parentNumber: number;
}) {
  if (difference.ranges === 0) {
    return <p>The content is the same as R{parentNumber}: not one byte differs.</p>;
  }
  return (
    <div className="flex flex-col gap-3">
      <p>
        <strong>{counted(difference.bytes, "byte")}</strong> {difference.bytes === 1 ? "differs" : "differ"}{" "}
        from R{parentNumber}, in {counted(difference.ranges, "place")}.
      </p>
      <Table
        caption={`Where it differs from R${parentNumber}`}
        scroll="short"
        dense
        rows={difference.first}
        rowKey={(range) => String(range.address)}
        columns={[
          { key: "from", header: "From", numeric: true, cell: (range) => addressText(range.address) },
          {
            key: "to",
            header: "To",
            numeric: true,
            cell: (range) => addressText(range.address + range.length - 1),
          },
          { key: "length", header: "Length", unit: "bytes", numeric: true, cell: (range) => range.length },
        ]}
      />
      {difference.ranges > difference.first.length && (
        <p className="text-13 text-ink2">The first {difference.first.length} places are listed.</p>
      )}
    </div>
  );
}
