import Form from "next/form";
import { Button } from "@/components/ui/action/button";
import { Select } from "@/components/ui/form/select";

/** One programme or all; a plain form, so that the address says what is shown. */
export function LedgerFilter({
  programmes,
  chosen,
}: {
  programmes: readonly { id: string; name: string }[];
  chosen: string;
}) {
  return (
    <Form action="/ledger" className="no-print flex flex-wrap items-end gap-2">
      <Select
        key={chosen}
        label="Programme"
        name="programme"
        defaultValue={chosen}
        emptyLabel="All"
        options={programmes.map(({ id, name }) => ({ value: id, label: name }))}
        fieldClassName="w-60 max-w-full"
      />
      <Button type="submit">Show</Button>
    </Form>
  );
}
