import type { ReactNode } from "react";

export interface MethodProps {
  id: string;
  title: string;
  children: ReactNode;
  /** Where the formula comes from, in plain words; "from memory" and "common practice, no source" are said so. */
  source: ReactNode;
  /** Where it stops holding. */
  limits: ReactNode;
}

/** One method: what is computed, its source, its limits. */
export function Method({ id, title, children, source, limits }: MethodProps) {
  return (
    <section aria-labelledby={id} className="border-line border-t pt-6">
      <h2 id={id} className="text-20">
        <a href={`#${id}`} className="hover:underline">
          {title}
        </a>
      </h2>
      <div className="mt-2 grid gap-x-12 gap-y-4 xl:grid-cols-[minmax(0,1fr)_17rem]">
        <div className="flex max-w-prose flex-col gap-3 text-15 leading-relaxed">{children}</div>
        <dl className="flex max-w-prose flex-col gap-2 text-13 text-ink2">
          <div>
            <dt className="font-semibold text-ink">Source</dt>
            <dd>{source}</dd>
          </div>
          <div>
            <dt className="font-semibold text-ink">Limits</dt>
            <dd>{limits}</dd>
          </div>
        </dl>
      </div>
    </section>
  );
}

/** A formula on a line of its own, in the numeral face. */
export function Formula({ children }: { children: ReactNode }) {
  return (
    <p className="tabular border-action border-l-[3px] bg-surface py-2 pr-3 pl-3 text-15 [&_sub]:text-[0.75em] [&_sup]:text-[0.75em]">
      {children}
    </p>
  );
}
