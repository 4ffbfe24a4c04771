import { Button } from "@/components/ui/action/button";
import { Select } from "@/components/ui/form/select";
import type { RevisionChangesView } from "@/lib/services/change-sets/schema";

/** Which revision this one is set against; a plain form, so that the choice is part of the address. */
export function AgainstForm({ view, order }: { view: RevisionChangesView; order: string }) {
  const { revision, against, choices } = view;
  const others = [...(against ? [against] : []), ...choices.filter(({ id }) => id !== against?.id)];
  if (others.length < 2) return null;
  return (
    <form action={`/revisions/${revision.id}`} method="get" className="flex flex-wrap items-end gap-2">
      {order !== "function" && <input type="hidden" name="order" value={order} />}
      <Select
        label="Set against"
        name="against"
        defaultValue={against?.id}
        options={others
          .toSorted((p, q) => q.number - p.number)
          .map(({ id, number, title }) => ({ value: id, label: `R${number} ${title}` }))}
        fieldClassName="w-60"
      />
      <Button type="submit">Show</Button>
    </form>
  );
}
