import type { Route } from "next";
import type { ShownSide } from "@/components/features/change-sets/detail/heat-view";
import type { ListOrder } from "@/components/features/change-sets/list/change-order";

/** Stands in the address for the bytes that no characteristic covers; no name of a description looks like it. */
export const BYTES_KEY = "~bytes";

/** What of a change set is in view. */
export interface ChangesView {
  /** Name of the opened change, or `~bytes`; null: the first one. */
  change: string | null;
  /** Revision it is compared with; null: what stands, else the parent. */
  against: string | null;
  order: ListOrder;
  side: ShownSide;
  plane: readonly number[] | null;
}

type Parameters = Record<string, string | string[] | undefined>;

/** Reads a view from the parameters of a link; what makes no sense is left out. */
export function viewFromParameters(parameters: Parameters): ChangesView {
  const text = (name: string) => (typeof parameters[name] === "string" ? parameters[name] : null);
  const side = (["difference", "before", "after"] as const).find((known) => known === text("show"));
  const plane = /^\d{1,5}(-\d{1,5}){0,2}$/.test(text("plane") ?? "")
    ? text("plane")?.split("-").map(Number)
    : null;
  return {
    change: text("change"),
    against: text("against"),
    order: text("order") === "effect" ? "effect" : "function",
    side: side ?? "difference",
    plane: plane ?? null,
  };
}

/** Address of a revision's page with a change opened; numbers, plane and order as said. */
export function changeAddress(
  revisionId: string,
  { change, against, order }: Pick<ChangesView, "change" | "against" | "order">,
): Route {
  const parameters = new URLSearchParams();
  if (change !== null) parameters.set("change", change);
  if (against !== null) parameters.set("against", against);
  if (order !== "function") parameters.set("order", order);
  const query = parameters.size > 0 ? `?${parameters}` : "";
  return `/revisions/${revisionId}${query}${change === null ? "" : "#change"}` as Route;
}
