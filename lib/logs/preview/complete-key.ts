import type { LogPreview } from "@/lib/logs/preview/preview-log";
import type { ChannelKey } from "@/lib/logs/types";

/**
 * The key as it is kept: what the person stated, and every other column as it was read, so that nothing is guessed anew next
 * time. A wheel speed named by its axle stays open unless it was stated: the vehicle sheet says which axle is driven.
 */
export function completeKey(preview: LogPreview, stated: ChannelKey): ChannelKey {
  const columns = preview.columns
    .filter(({ role, axle, title }) => role !== "time" && !(axle && stated.columns?.[title] === undefined))
    .map(({ title, role, channel }) => [title, { channel: role === "text" ? null : channel }] as const);
  const titles = new Set(preview.columns.map(({ title }) => title));
  const found = preview.layout && preview.time;
  const time = stated.time ?? (found ? { column: found.column, form: found.form } : undefined);
  return {
    ...stated,
    ...(time && { time }),
    columns: Object.fromEntries([
      ...columns,
      ...Object.entries(stated.columns ?? {}).filter(([title]) => titles.has(title)),
    ]),
  };
}
