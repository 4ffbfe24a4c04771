import type { ReactNode } from "react";
import { Fingerprint } from "@/components/ui/data/fingerprint";

type Data = Record<string, unknown>;

const DIGEST = /^[0-9a-f]{64}$/;
const ID = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/;
/** Names that would read oddly when only taken apart at their capitals. */
const LABELS: Record<string, string> = {
  sha256: "fingerprint",
  imageSha256: "image",
  recordSha256: "record digest",
  inputSha256: "inputs",
  a: "side A",
  b: "side B",
};

const isData = (value: unknown): value is Data =>
  typeof value === "object" && value !== null && !Array.isArray(value);

function label(name: string): string {
  return (
    LABELS[name] ??
    name.replaceAll(/([A-Z0-9]+)/g, (part) => ` ${part.toLowerCase()}`).replaceAll(/[_.]/g, " ")
  );
}

/** A value as a person reads it; a digest short, an id shorter, a missing one as "nothing". */
function show(value: unknown): ReactNode {
  if (value === null || value === undefined || value === "")
    return <span className="text-ink2">nothing</span>;
  if (typeof value === "boolean") return value ? "yes" : "no";
  if (typeof value === "number") return <span className="tabular">{String(value).replace("-", "−")}</span>;
  if (typeof value === "string") {
    if (DIGEST.test(value)) return <Fingerprint value={value} copy={false} />;
    if (ID.test(value))
      return (
        <code title={value} className="tabular text-[0.92em]">
          {value.slice(0, 8)}
        </code>
      );
    return <span className="break-words">{value.replaceAll("_", " ")}</span>;
  }
  const items = Array.isArray(value)
    ? value.map((item) => ["", item] as const)
    : Object.entries(value as Data);
  return items.map(([name, item], index) => (
    // biome-ignore lint/suspicious/noArrayIndexKey: pieces of one entry that never changes
    <span key={index}>
      {index > 0 && ", "}
      {name && <span className="text-ink2">{label(name)} </span>}
      {show(item)}
    </span>
  ));
}

/** Words before numbers, numbers before what only a machine compares; the database keeps no order of its own. */
function weight(value: unknown): number {
  if (typeof value === "string") return DIGEST.test(value) ? 4 : ID.test(value) ? 3 : 0;
  return typeof value === "object" && value !== null ? 2 : 1;
}

function Line({ term, children }: { term: string; children: ReactNode }) {
  return (
    <div className="flex min-w-0 flex-wrap gap-x-2">
      <dt className="text-ink2">{term}</dt>
      <dd className="min-w-0">{children}</dd>
    </div>
  );
}

/** What an entry keeps, in words; old and new values stand beside each other. */
export function EntryData({ data }: { data: Data }) {
  const before = isData(data.old) ? data.old : {};
  const after = isData(data.new) ? data.new : {};
  const changed = [...new Set([...Object.keys(before), ...Object.keys(after)])];
  const plain = Object.entries(data)
    .filter(([name, value]) => !((name === "old" || name === "new") && isData(value)))
    .sort(([, a], [, b]) => weight(a) - weight(b));
  if (plain.length === 0 && changed.length === 0) return null;
  return (
    <dl className="flex flex-wrap gap-x-6 gap-y-0.5 text-13">
      {plain.map(([name, value]) => (
        <Line key={name} term={label(name)}>
          {show(value)}
        </Line>
      ))}
      {changed.map((name) => (
        <Line key={`changed ${name}`} term={label(name)}>
          {"old" in data && (
            <>
              {show(before[name])} <span aria-hidden>→</span>
              <span className="sr-only">became</span>{" "}
            </>
          )}
          {show(after[name])}
        </Line>
      ))}
    </dl>
  );
}
