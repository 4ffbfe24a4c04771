"use client";

import { type FormEvent, useState } from "react";
import type { Range } from "@/components/charts/frame/series";
import { Button } from "@/components/ui/action/button";
import { Menu } from "@/components/ui/action/menu";
import { NumberInput } from "@/components/ui/form/number-input";

export interface RangeFormProps {
  whole: Range;
  range: Range | null;
  unit: string;
  onRange: (range: Range | null) => void;
}

/** The range in view, typed: what dragging does with a mouse, for keys and fingers too (WCAG 2.5.7). */
export function RangeForm({ whole, range, unit, onRange }: RangeFormProps) {
  const [error, setError] = useState<string | null>(null);
  const shown = range ?? whole;

  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault();
    const data = new FormData(event.currentTarget);
    const read = (name: string) =>
      Number(String(data.get(name)).replaceAll(/\s/g, "").replace(",", ".").replace("\u2212", "-"));
    const from = Math.max(whole.from, read("from"));
    const to = Math.min(whole.to, read("to"));
    if (!(from < to)) {
      setError(`Give two numbers between ${whole.from} and ${whole.to}, the smaller one first.`);
      return;
    }
    setError(null);
    event.currentTarget.closest("details")?.removeAttribute("open");
    onRange({ from, to });
  };

  return (
    <Menu label="Range" align="fit" framed>
      <form key={`${shown.from}-${shown.to}`} onSubmit={submit} className="flex flex-col gap-3 p-2 sm:w-60">
        <div className="grid grid-cols-2 gap-2">
          <NumberInput label="From" name="from" defaultValue={roundedText(shown.from)} />
          <NumberInput label="To" name="to" defaultValue={roundedText(shown.to)} />
        </div>
        <p className="text-13 text-ink2">In {unit}. With a mouse: drag across the drawing.</p>
        {error && (
          <p role="alert" className="text-13 text-unmet">
            {error}
          </p>
        )}
        <Button type="submit">Show this range</Button>
      </form>
    </Menu>
  );
}

function roundedText(value: number): string {
  return String(Math.round(value * 100) / 100);
}
