import { Button } from "@/components/ui/action/button";
import { Select } from "@/components/ui/form/select";

export interface OrderCardFormProps {
  revisions: readonly { id: string; number: number; title: string; stands: boolean }[];
  a: string;
  b: string;
  twins: number;
}

const TWINS = [1, 2, 3, 4, 5, 6, 8];

/** Chooses what the order card is for; works without script, since it only asks for the page again. */
export function OrderCardForm({ revisions, a, b, twins }: OrderCardFormProps) {
  const options = revisions.map(({ id, number, title, stands }) => ({
    value: id,
    label: `R${number} ${title}${stands ? " (stands)" : ""}`,
  }));
  return (
    <form method="get" className="grid gap-3 sm:grid-cols-[1fr_1fr_8rem_auto] sm:items-end">
      <Select label="Side A, the reference" name="a" defaultValue={a} options={options} />
      <Select label="Side B, the candidate" name="b" defaultValue={b} options={options} />
      <Select
        label="Twins a side"
        name="twins"
        defaultValue={String(twins)}
        options={TWINS.map((count) => ({ value: String(count), label: String(count) }))}
      />
      <Button type="submit">Show</Button>
    </form>
  );
}
