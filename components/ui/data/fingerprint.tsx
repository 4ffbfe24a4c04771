import { CopyButton } from "@/components/ui/action/copy-button";

export interface FingerprintProps {
  /** Full digest as lower-case hex. */
  value: string;
  /** Print it whole, in groups of eight: for records and print. */
  full?: boolean;
  copy?: boolean;
}

/** A digest, short by default: first and last six digits, the whole in its title and behind the copy button. */
export function Fingerprint({ value, full = false, copy = true }: FingerprintProps) {
  const groups = value.match(/.{1,8}/g) ?? [value];
  const text = full || value.length <= 14 ? groups.join(" ") : `${value.slice(0, 6)}…${value.slice(-6)}`;
  return (
    <span className="inline-flex max-w-full items-center gap-0.5 align-middle">
      <code title={value} className="tabular break-words text-[0.92em]">
        {text}
      </code>
      {copy && <CopyButton value={value} label="fingerprint" />}
    </span>
  );
}
