import type { ReactNode } from "react";

export interface PageHeadingProps {
  title: ReactNode;
  /** Stands above the title, e.g. breadcrumbs. */
  above?: ReactNode;
  /** One or two sentences under the title. */
  lead?: ReactNode;
  /** Tags or marks on the line of the title. */
  marks?: ReactNode;
  /** Buttons at the right; under the title on a phone. */
  actions?: ReactNode;
}

/** The one h1 of a page. */
export function PageHeading({ title, above, lead, marks, actions }: PageHeadingProps) {
  return (
    <header className="flex flex-col gap-2">
      {above}
      <div className="flex flex-wrap items-start justify-between gap-x-6 gap-y-3">
        <div className="min-w-0 flex-1 basis-80">
          <div className="flex flex-wrap items-center gap-x-3 gap-y-1">
            <h1 className="font-bold font-head text-26 md:text-34">{title}</h1>
            {marks}
          </div>
          {lead && <div className="mt-1 max-w-prose text-15 text-ink2 md:text-17">{lead}</div>}
        </div>
        {actions && <div className="no-print flex flex-wrap gap-2">{actions}</div>}
      </div>
    </header>
  );
}
