import { Button } from "@/components/ui/action/button";
import { Select } from "@/components/ui/form/select";
import { MOST_TWINS } from "@/lib/compare/plan/order-card";

export interface OrderCardFormProps {
  /** The two images to choose from; null on a null test, which has one. */
  sides: {
    revisions: readonly { id: string; number: number; title: string; stands: boolean }[];
    a: string;
    b: string;
  } | null;
  twins: number;
}

const TWINS = Array.from({ length: MOST_TWINS }, (_, i) => String(i + 1));

/** Chooses what the order card is for; works without script, since it only asks for the page again. */
export function OrderCardForm({ sides, twins }: OrderCardFormProps) {
  const options = (sides?.revisions ?? []).map(({ id, number, title, stands }) => ({
    value: id,
    label: `R${number} ${title}${stands ? " (stands)" : ""}`,
  }));
  return (
    <form method="get" className="grid gap-3 sm:grid-cols-[1fr_1fr_8rem_auto] sm:items-end">
      {sides && (
        <>
          <Select label="Side A, the reference" name="a" defaultValue={sides.a} options={options} />
          <Select label="Side B, the candidate" name="b" defaultValue={sides.b} options={options} />
        </>
      )}
      <Select
        label="Twins a side"
        name="twins"
        defaultValue={String(twins)}
        options={TWINS.map((count) => ({ value: count, label: count }))}
      />
      <Button type="submit">Show</Button>
    </form>
  );
}
