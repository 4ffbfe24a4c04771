"use client";

import { Monitor, Moon, Sun } from "lucide-react";
import { useId, useState } from "react";
import { THEME_COOKIE, type Theme } from "@/components/features/shell/appearance";
import { rememberAppearance } from "@/components/features/shell/remember-appearance";

const CHOICES = [
  { theme: "system", label: "As the device", Icon: Monitor },
  { theme: "light", label: "Light", Icon: Sun },
  { theme: "dark", label: "Dark", Icon: Moon },
] as const;

/** Light, dark, or as the device says. Takes effect at once and is kept on this device for a year. */
export function ThemeSwitch({ initial }: { initial: Theme }) {
  const name = useId();
  const [theme, setTheme] = useState<Theme>(initial);

  const choose = (next: Theme) => {
    setTheme(next);
    document.documentElement.dataset.theme = next;
    rememberAppearance(THEME_COOKIE, next);
  };

  return (
    <fieldset className="no-print inline-flex rounded border border-line">
      <legend className="sr-only">Colours of the pages</legend>
      {CHOICES.map(({ theme: value, label, Icon }) => (
        <label
          key={value}
          title={label}
          className="relative flex size-9 items-center justify-center text-ink2 hover:text-ink has-checked:bg-sunk has-checked:text-ink has-focus-visible:outline-3 has-focus-visible:outline-focus has-focus-visible:outline-offset-2"
        >
          <input
            type="radio"
            name={name}
            value={value}
            checked={theme === value}
            onChange={() => choose(value)}
            className="sr-only"
          />
          <span className="sr-only">{label}</span>
          <Icon aria-hidden size={16} />
        </label>
      ))}
    </fieldset>
  );
}
