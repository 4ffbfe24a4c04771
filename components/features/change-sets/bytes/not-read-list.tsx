import { FirstListed } from "@/components/features/change-sets/list/first-listed";
import { counted } from "@/components/ui/data/number-text";
import { Table } from "@/components/ui/data/table";
import { Disclosure } from "@/components/ui/layout/disclosure";

/** Rows that are listed at most. */
const MOST_ROWS = 200;

/** What a description names and the reader could not tell, with why; folded away, absent where all was read. */
export function NotReadList({ notRead }: { notRead: readonly { name: string; reason: string }[] }) {
  if (notRead.length === 0) return null;
  const rows = notRead.slice(0, MOST_ROWS);
  return (
    <Disclosure summary="Not read" aside={counted(notRead.length, "characteristic")}>
      <Table
        caption="What was not read, and why"
        dense
        scroll="short"
        rows={rows}
        rowKey={(row, index) => `${row.name}${index}`}
        columns={[
          { key: "name", header: "Name", rowHeader: true, className: "break-all", cell: (row) => row.name },
          { key: "reason", header: "Why", cell: (row) => row.reason },
        ]}
      />
      <FirstListed listed={rows.length} count={notRead.length} />
    </Disclosure>
  );
}
