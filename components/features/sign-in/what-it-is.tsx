const STEPS = [
  {
    term: "Add a revision",
    text: "A calibrator uploads the image. Its fingerprint and what changed against its parent are kept with it, for good.",
  },
  {
    term: "Drive it out and back",
    text: "A tester drives twins of runs in an order that takes wind, slope and drift out. Each log gets its verdict at the road side.",
  },
  {
    term: "Compare side A with side B",
    text: "The difference with the band it is sure to, region by region: gain shown, loss shown, or not shown.",
  },
  {
    term: "Decide, and keep the way back",
    text: "A lead promotes, holds or turns down on gates with their evidence. Rolling back is one deliberate step.",
  },
];

/** What the product is for, for somebody who has never seen it. */
export function WhatItIs() {
  return (
    <div className="flex flex-col gap-8">
      <header className="flex flex-col gap-3">
        <h1 className="font-bold font-head text-34">
          Two passes. <br className="sm:hidden" />
          One decision.
        </h1>
        <p className="max-w-prose text-17 text-ink2">
          For people who change the calibration of engine control units and have to prove on the road what a
          change did: what is in the car, what changed, what it did, how sure we are, and who said yes.
        </p>
      </header>
      <ol className="crop-marks mx-3.5 flex max-w-2xl flex-col bg-surface px-5 sm:px-6">
        {STEPS.map((step, index) => (
          <li key={step.term} className="flex gap-4 border-line border-t py-4 first:border-t-0">
            <span aria-hidden className="tabular pt-px text-15 text-ink2">
              {index + 1}
            </span>
            <div>
              <p className="font-semibold text-17">{step.term}</p>
              <p className="text-15 text-ink2">{step.text}</p>
            </div>
          </li>
        ))}
      </ol>
    </div>
  );
}
