"use client";

import { useId } from "react";
import { cn } from "@/lib/cn";

export interface SegmentedControlProps<Value extends string> {
  /** Name of the choice, for assistive technology. */
  legend: string;
  options: readonly { value: Value; label: string }[];
  value: Value;
  onChange: (value: Value) => void;
}

/** One of a few, side by side. Native radio buttons underneath: arrows move, the choice is announced. */
export function SegmentedControl<Value extends string>({
  legend,
  options,
  value,
  onChange,
}: SegmentedControlProps<Value>) {
  const name = useId();
  return (
    <fieldset className="inline-flex rounded border border-edge bg-surface">
      <legend className="sr-only">{legend}</legend>
      {options.map((option, index) => (
        <label
          key={option.value}
          className={cn(
            "relative flex min-h-control min-w-control items-center justify-center px-3 font-medium text-15 text-ink2 hover:text-ink",
            "has-checked:font-semibold has-checked:text-ink has-checked:after:absolute has-checked:after:inset-x-2 has-checked:after:bottom-1.5 has-checked:after:h-[3px] has-checked:after:bg-action",
            "has-focus-visible:outline-3 has-focus-visible:outline-focus has-focus-visible:outline-offset-2",
            index > 0 && "border-line border-l",
          )}
        >
          <input
            type="radio"
            name={name}
            value={option.value}
            checked={option.value === value}
            onChange={() => onChange(option.value)}
            className="sr-only"
          />
          {option.label}
        </label>
      ))}
    </fieldset>
  );
}
