import { Button } from "@/components/ui/action/button";
import { Select } from "@/components/ui/form/select";

export interface OrderCardFormProps {
  /** The two images to choose from; null on a null test, which has one. */
  sides: {
    revisions: readonly { id: string; number: number; title: string; stands: boolean }[];
    a: string;
    b: string;
  } | null;
  twins: number;
}

const TWINS = [1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12];

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
        options={TWINS.map((count) => ({ value: String(count), label: String(count) }))}
      />
      <Button type="submit">Show</Button>
    </form>
  );
}
