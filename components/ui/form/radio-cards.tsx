import { type ChangeEventHandler, type ReactNode, useId } from "react";
import { FieldError } from "@/components/ui/form/field";
import { cn } from "@/lib/cn";

export interface RadioCard {
  value: string;
  label: ReactNode;
  description?: ReactNode;
  /** Why it can't be chosen; the card is then off and the sentence printed on it. */
  blockedBecause?: string | null;
}

export interface RadioCardsProps {
  name: string;
  legend: ReactNode;
  options: readonly RadioCard[];
  hint?: ReactNode;
  error?: ReactNode;
  required?: boolean;
  defaultValue?: string;
  /** With `onChange`: controlled. */
  value?: string;
  onChange?: ChangeEventHandler<HTMLInputElement>;
  /** Side by side from 640 px on. */
  columns?: 1 | 2 | 3;
}

const COLUMNS = { 1: "", 2: "sm:grid-cols-2", 3: "sm:grid-cols-3" } as const;

/** One of a few, each with room for a line of explanation. The chosen card carries the plum left edge. */
export function RadioCards({
  name,
  legend,
  options,
  hint,
  error,
  required,
  defaultValue,
  value,
  onChange,
  columns = 1,
}: RadioCardsProps) {
  const id = useId();
  const errorId = error ? `${id}-error` : undefined;
  return (
    <fieldset aria-describedby={errorId} className="min-w-0">
      <legend className="mb-1 font-semibold text-15">
        {legend}
        {required && <span className="ml-2 font-normal text-13 text-ink2">required</span>}
      </legend>
      {hint && <p className="mb-2 text-13 text-ink2">{hint}</p>}
      <div className={cn("grid gap-2", COLUMNS[columns])}>
        {options.map((option) => {
          const chosen = value === undefined ? undefined : option.value === value;
          return (
            <label
              key={option.value}
              className={cn(
                "relative flex min-h-control gap-3 rounded border border-edge bg-surface px-3 py-2.5 hover:border-ink",
                "has-checked:border-action has-checked:before:absolute has-checked:before:inset-y-0 has-checked:before:left-0 has-checked:before:w-[3px] has-checked:before:bg-action",
                "has-focus-visible:outline-3 has-focus-visible:outline-focus has-focus-visible:outline-offset-2",
                option.blockedBecause && "border-line bg-sunk text-ink2 hover:border-line",
              )}
            >
              <input
                type="radio"
                name={name}
                value={option.value}
                required={required}
                disabled={Boolean(option.blockedBecause)}
                defaultChecked={value === undefined ? option.value === defaultValue : undefined}
                checked={chosen}
                onChange={onChange}
                className="mt-0.5 size-4.5 shrink-0 focus-visible:outline-none"
              />
              <span className="flex min-w-0 flex-col gap-0.5">
                <span className="font-semibold text-15">{option.label}</span>
                {option.description && <span className="text-13 text-ink2">{option.description}</span>}
                {option.blockedBecause && <span className="text-13">{option.blockedBecause}</span>}
              </span>
            </label>
          );
        })}
      </div>
      {error && (
        <div className="mt-1">
          <FieldError id={errorId}>{error}</FieldError>
        </div>
      )}
    </fieldset>
  );
}
