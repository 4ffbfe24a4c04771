import type { Route } from "next";
import { Breadcrumbs, type Crumb } from "@/components/ui/layout/breadcrumbs";

export interface ProgrammeCrumbsProps {
  programme: { id: string; name: string };
  /** The way on from the programme to this page; the last one has no address. */
  then: readonly Crumb[];
}

/** Where a page of a programme stands: the list, the programme, and on. */
export function ProgrammeCrumbs({ programme, then }: ProgrammeCrumbsProps) {
  const own = { label: programme.name, href: `/programmes/${programme.id}` as Route };
  return <Breadcrumbs items={[{ label: "Programmes", href: "/programmes" }, own, ...then]} />;
}
