import type { Metadata } from "next";
import type { ReactNode } from "react";
import { AppShell } from "@/components/features/shell/app-shell";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { Notice } from "@/components/ui/status/notice";

export const metadata: Metadata = {
  title: "Cautions",
  description:
    "What can go wrong on the road, in the engine and before the law, and what the figures are not.",
};

export default function CautionsPage() {
  return (
    <AppShell>
      <PageHeading
        title="Cautions"
        lead="What can go wrong on the road, in the engine and before the law, and what the figures are not."
      />
      <div className="mt-8 grid gap-x-16 gap-y-12 lg:grid-cols-2">
        <Notice tone="caution" title="In one breath" className="lg:col-span-2">
          Measure on a closed course. A changed calibration can destroy an engine and make a vehicle illegal
          on the road. Twinpass measures and records; it approves nothing in law.
        </Notice>

        <Part title="On the road">
          <p>
            Full-throttle runs on public roads can be illegal and dangerous. Speed limits and traffic law
            always apply. Before the first run of a day:
          </p>
          <List
            items={[
              "a closed course, a proving ground, or a private road with permission and insurance that have not expired",
              "a trained driver, rested, belted, with a clear rule for breaking off a run",
              "a second person at the recorder: the driver drives and does nothing else",
              "tyres warm and at the set pressure, good for the speed; brakes that work and have room to stop twice",
              "nobody beside the road, no animals, a way for help to come in and a telephone that works there",
              "the run-out looked at on foot or slowly by car, on the same day",
            ]}
          />
          <p>
            Break off when anything sounds, smells or feels new, when a limit of the clearance is reached,
            when wind or rain comes up, and when anyone asks for it. A run broken off costs minutes.
          </p>
        </Part>

        <Part title="In the engine">
          <p>
            A mixture that is too lean, ignition that is too early, too much boost or too hot an exhaust can
            ruin an engine within seconds, and not always in the run in which it happens.
          </p>
          <List
            items={[
              "Full load is driven only after a calibrator has cleared that very image on a log at light load, with stop limits for the driver.",
              "A channel that is not recorded is unknown. It is never “fine”.",
              "A pull of ten seconds can’t show an exhaust temperature or an oil temperature that needs a minute to rise.",
              "A first map often spikes near the limiter. Look at the curve there before driving it again.",
              "Keep the image as found, read twice and equal, so that there is always a way back.",
            ]}
          />
        </Part>

        <Part title="Before the law">
          <p>
            Changing an engine calibration can void type approval, emissions compliance, warranty and
            insurance. In many places it is an offence to remove or weaken emission or safety functions, and
            to make, sell or fit what does so. Examples, which may have changed since this page was written:
          </p>
          <List
            items={[
              "United States: Clean Air Act §203(a)(3), 42 U.S.C. 7522(a)(3), on tampering and defeat devices; 49 U.S.C. 30122(b), on safety devices.",
              "European Union: Regulation (EC) 715/2007, Article 5, on emission control and defeat devices; Directive 2014/45/EU, Annex I 8.2.2.1, where absent or defective emission equipment fails the periodic test.",
              "Elsewhere: national registration, noise, emission and inspection rules of your own.",
            ]}
          />
          <p>
            This is no legal advice. Ask the authority or a licensed practice where the vehicle is registered
            and driven. A release in Twinpass says that a workshop decided something on stated evidence. It is
            no permission to drive.
          </p>
        </Part>

        <Part title="About the figures">
          <p>
            Figures are comparisons under stated assumptions, for one vehicle on the days it was driven. They
            are no ratings under SAE, ISO, DIN, JIS or UN rules, whichever formula refers them to standard
            air.
          </p>
          <List
            items={[
              "Read the ± and the n before the number.",
              "“No difference shown” means that this campaign could not show one. The smallest it could have shown stands beside it.",
              "Nothing is said about another fuel, temperature, gear, load or engine speed than those driven.",
              "One run is an anecdote. One direction is wind.",
              "The difference is far surer than the absolute figure: mass, tyre and losses are the same on both sides.",
            ]}
          />
        </Part>
      </div>
    </AppShell>
  );
}

function Part({ title, children }: { title: string; children: ReactNode }) {
  return (
    <section className="flex max-w-prose flex-col gap-3 text-15 leading-relaxed md:text-17">
      <h2 className="text-26">{title}</h2>
      {children}
    </section>
  );
}

function List({ items }: { items: readonly string[] }) {
  return (
    <ul className="flex list-[square] flex-col gap-1.5 pl-5 marker:text-action">
      {items.map((item) => (
        <li key={item}>{item}</li>
      ))}
    </ul>
  );
}
