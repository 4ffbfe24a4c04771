import type { Metadata } from "next";
import { AirMethods } from "@/app/methods/air-methods";
import { CalibrationMethods } from "@/app/methods/calibration-methods";
import { ComparisonMethods } from "@/app/methods/comparison-methods";
import { METHOD_CONTENTS } from "@/app/methods/contents";
import { JudgingMethods } from "@/app/methods/judging-methods";
import { MotionMethods } from "@/app/methods/motion-methods";
import { UncertaintyMethods } from "@/app/methods/uncertainty-methods";
import { AppShell } from "@/components/features/shell/app-shell";
import { PageHeading } from "@/components/ui/layout/page-heading";

export const metadata: Metadata = {
  title: "Methods",
  description: "Every formula that Twinpass uses, where it comes from and where it stops holding.",
};

export default function MethodsPage() {
  return (
    <AppShell>
      <PageHeading
        title="Methods"
        lead="Every formula used, where it comes from and where it stops holding. Standards are named as sources; Twinpass claims no conformity with any of them, and its figures are no ratings under them."
      />
      <div className="mt-8 grid gap-10 lg:grid-cols-[13rem_minmax(0,1fr)]">
        <nav aria-label="On this page" className="no-print lg:sticky lg:top-6 lg:self-start">
          <ol className="columns-2 text-15 lg:columns-1">
            {METHOD_CONTENTS.map(([id, words]) => (
              <li key={id}>
                <a
                  href={`#${id}`}
                  className="inline-flex min-h-7 items-center text-ink2 hover:text-ink hover:underline"
                >
                  {words}
                </a>
              </li>
            ))}
          </ol>
        </nav>
        <div className="flex min-w-0 flex-col gap-8">
          <MotionMethods />
          <JudgingMethods />
          <AirMethods />
          <UncertaintyMethods />
          <ComparisonMethods />
          <CalibrationMethods />
          <p className="max-w-prose border-line border-t pt-6 text-13 text-ink2">
            Inside, all quantities are SI: metre, kilogram, second, newton, pascal, kelvin. Conversion happens
            when a figure is read or shown, by exact factors (1 hp = 745.699 871 582 W, 1 PS = 735.498 75 W, 1
            lbf·ft = 1.355 817 948 N·m). “From memory” and “common practice, no source” mark what nobody
            should take as proven.
          </p>
        </div>
      </div>
    </AppShell>
  );
}
