import { RELEVANCE_WORDS, SET_WORDS } from "@/components/features/programmes/calibration/mark-words";
import {
  ALGORITHM_WORDS,
  excludedText,
  parametersText,
} from "@/components/features/programmes/calibration/region-words";
import { addressText } from "@/components/ui/data/address-text";
import { Table } from "@/components/ui/data/table";
import type { RelevanceMark } from "@/lib/calibration/changes/relevance";
import type { AxisLink } from "@/lib/calibration/coverage/types";
import type { ChecksumRegion } from "@/lib/calibration/image/checksum-regions";
import { channelWords } from "@/lib/logs/channels/channel-words";

/** One version of the marks, to read. */
export function MarksTable({ marks }: { marks: readonly RelevanceMark[] }) {
  return (
    <Table
      caption="What is marked"
      rows={marks}
      rowKey={(mark) => `${mark.set}${mark.name}${mark.relevance}`}
      columns={[
        { key: "name", header: "Name", rowHeader: true, className: "break-all", cell: (mark) => mark.name },
        { key: "set", header: "Kind", cell: (mark) => SET_WORDS[mark.set] },
        { key: "relevance", header: "Relevant for", cell: (mark) => RELEVANCE_WORDS[mark.relevance] },
        { key: "note", header: "Note", cell: (mark) => mark.note },
      ]}
    />
  );
}

export const LINK_WORDS: Record<AxisLink["by"], string> = {
  column: "by a column of the same title",
  title: "by its name",
  hand: "chosen by hand",
};

/** One version of the links, to read. */
export function LinksTable({ links }: { links: readonly AxisLink[] }) {
  return (
    <Table
      caption="Quantities and their channels"
      rows={links}
      rowKey={(link) => link.quantity}
      columns={[
        {
          key: "quantity",
          header: "Quantity",
          rowHeader: true,
          className: "break-all",
          cell: (link) => link.quantity,
        },
        { key: "channel", header: "Channel", cell: (link) => channelWords(link.channel) },
        { key: "by", header: "By", cell: (link) => LINK_WORDS[link.by] },
      ]}
    />
  );
}

/** One version of the regions, to read. */
export function RegionsTable({ regions }: { regions: readonly ChecksumRegion[] }) {
  return (
    <Table
      caption="Checksum regions"
      rows={regions}
      rowKey={(region) => region.name}
      columns={[
        { key: "name", header: "Name", rowHeader: true, cell: (region) => region.name },
        {
          key: "span",
          header: "From, to",
          className: "tabular whitespace-nowrap",
          cell: (region) => `${addressText(region.from)} – ${addressText(region.to)}`,
        },
        { key: "algorithm", header: "Checksum", cell: (region) => ALGORITHM_WORDS[region.algorithm] },
        { key: "parameters", header: "Parameters", className: "min-w-64", cell: parametersText },
        {
          key: "stored",
          header: "Stored at",
          className: "tabular",
          cell: (region) => (region.storedAt === null ? "not stored" : addressText(region.storedAt)),
        },
        {
          key: "expected",
          header: "Must be",
          className: "tabular",
          cell: (region) => (region.expected === null ? "as stored" : addressText(region.expected)),
        },
        { key: "excluded", header: "Left out", className: "tabular", cell: excludedText },
      ]}
    />
  );
}
