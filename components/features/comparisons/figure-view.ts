import type { OverlayView } from "@/components/charts/overlay/overlay-types";

/** Reads a view from the parameters of a link; what makes no sense is left out. */
export function viewFromParameters(
  parameters: Record<string, string | string[] | undefined>,
): Partial<OverlayView> {
  const text = (name: string) => (typeof parameters[name] === "string" ? parameters[name] : undefined);
  const quantityId = ["power", "torque"].find((id) => id === text("quantity"));
  const mode = (["percent", "absolute"] as const).find((known) => known === text("difference"));
  const [from, to] = (text("rpm") ?? "").split("-").map(Number);
  const range =
    from !== undefined && to !== undefined && from >= 0 && to > from && to < 30_000 ? { from, to } : null;
  return {
    ...(quantityId && { quantityId }),
    ...(mode && { mode }),
    ...(range && { range }),
    ...(text("runs") === "each" && { everyRun: true }),
  };
}

/** The same view as parameters of a link: it shows the reader exactly what the sender saw. */
export function viewToParameters(view: OverlayView): string {
  const parameters = new URLSearchParams({ quantity: view.quantityId, difference: view.mode });
  if (view.range) parameters.set("rpm", `${Math.round(view.range.from)}-${Math.round(view.range.to)}`);
  if (view.everyRun) parameters.set("runs", "each");
  return parameters.toString();
}
