export interface DateTimeProps {
  /** An instant: ISO 8601 text, or a Date. */
  at: string | Date;
  /** IANA zone of the place it belongs to, e.g. that of the road day. */
  zone: string;
  precision?: "day" | "minute" | "second";
}

/** An instant at its own place, with the zone: "19 Nov 2026 14:32 CET". The title holds the same instant in UTC. */
export function DateTime({ at, zone, precision = "minute" }: DateTimeProps) {
  const instant = typeof at === "string" ? new Date(at) : at;
  if (Number.isNaN(instant.getTime())) return <span>–</span>;
  const iso = instant.toISOString();
  return (
    <time dateTime={iso} title={`${iso.slice(0, 19).replace("T", " ")} UTC`} className="whitespace-nowrap">
      {dateTimeText(instant, zone, precision)}
    </time>
  );
}

/** The text of `DateTime`, for places that take text only. */
export function dateTimeText(
  at: Date,
  zone: string,
  precision: "day" | "minute" | "second" = "minute",
): string {
  const date = new Intl.DateTimeFormat("en-GB", {
    timeZone: zone,
    day: "numeric",
    month: "short",
    year: "numeric",
  }).format(at);
  if (precision === "day") return date;
  const time = new Intl.DateTimeFormat("en-GB", {
    timeZone: zone,
    hour: "2-digit",
    minute: "2-digit",
    second: precision === "second" ? "2-digit" : undefined,
    timeZoneName: "short",
  }).format(at);
  return `${date} ${time}`;
}
