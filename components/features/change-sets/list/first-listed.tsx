import { numberText } from "@/components/ui/data/number-text";

export interface FirstListedProps {
  listed: number;
  count: number;
  /** What is listed, e.g. "places". */
  things?: string;
}

/** Says under a list that it holds the first ones only; nothing where it holds all. */
export function FirstListed({ listed, count, things }: FirstListedProps) {
  if (count <= listed) return null;
  return (
    <p className="text-13 text-ink2">
      The first {numberText(listed)} of {numberText(count)}
      {things && ` ${things}`} are listed.
    </p>
  );
}
