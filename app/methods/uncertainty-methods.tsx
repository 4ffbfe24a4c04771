import { Formula, Method } from "@/app/methods/method";
import { type Column, Table } from "@/components/ui/data/table";
import { READING_LIMITS } from "@/lib/measure/air/weather-uncertainty";

interface PartRow {
  part: string;
  enters: string;
  figure: string;
}

const ROWS: readonly PartRow[] = [
  {
    part: "Mass",
    enters: "The whole wheel force: the coast-down weighs resistance with the same mass.",
    figure: "As typed; else 1.5 %.",
  },
  {
    part: "Speed scale, rolling circumference",
    enters:
      "Twice, by speed and by acceleration. Where the gearing is typed instead of measured, torque once by each.",
    figure:
      "GPS 0.1 %; a wheel that nothing checks 1 %; a typed circumference as typed, else 0.5 %; a speed read off 0.5 %; a tyre marking 1.5 %. Where only driven wheels tell the speed, 1.5 parts in a million of slip for each newton on top.",
  },
  {
    part: "Wind, grade, rolling and air resistance",
    enters: "The force at the peak, by the joint fit of all coast-downs of the road day.",
    figure: "Covariance of that fit, split in three (below). A single run has gusts of its own on top.",
  },
  {
    part: "Engine inertia",
    enters: "Its share of the force, η · J · k² · a.",
    figure:
      "As typed, 5 % where only the figure is; else 35 % of 0.10 + 0.035 kg·m² per litre (compression ignition 0.12 + 0.05).",
  },
  {
    part: "Wheel inertia",
    enters: "As mass, ΣJ/r², in pull and coast-down.",
    figure:
      "As typed, 5 % where only the figure is; else 25 % of 4.5 kg·m² for all wheels at 0.31 m, growing with r⁴.",
  },
  {
    part: "Mesh efficiency",
    enters: "The wheel force, which is divided by it.",
    figure:
      "As typed, 1 % where only the figure is; else 0.96 with 0.015 (front drive), 0.94 with 0.02 (rear), 0.93 with 0.025 (all wheels).",
  },
  {
    part: "Weather",
    enters: "The density of the air in the drag; on the reference basis also the factor, vapour with it.",
    figure: `Readings within ±${READING_LIMITS.tempC} °C, ±${READING_LIMITS.pressureHpa / 10} kPa and ±${READING_LIMITS.humidityPct} % humidity, evenly likely: the limit over √3.`,
  },
  {
    part: "Smoothing",
    enters: "Single runs: noise of the mean acceleration over 0.8 s at the peak.",
    figure: "Covariance of the smoothed speed. In a side’s mean the scatter of its runs holds it.",
  },
  {
    part: "Repeatability",
    enters: "Sides: the scatter of single runs over √n.",
    figure:
      "Scatter about each side’s mean, pooled over both sides and ±200 per minute, widened by Student’s t.",
  },
];

const COLUMNS: Column<PartRow>[] = [
  { key: "part", header: "Part", rowHeader: true, className: "min-w-36", cell: (row) => row.part },
  { key: "enters", header: "Enters power by", className: "min-w-52", cell: (row) => row.enters },
  { key: "figure", header: "Standard uncertainty", className: "min-w-60", cell: (row) => row.figure },
];

/** How well an absolute figure is known, and what that is made of. */
export function UncertaintyMethods() {
  return (
    <>
      <Method
        id="uncertainty"
        title="Uncertainty of an absolute figure"
        source={
          <>
            Root sum of squares of independent parts, coverage factor 2 (about 95 %), limits over √3,
            Student’s t for few runs: JCGM 100:2008 (GUM), 5.1, 6.3, 4.3.7, G.3. Instruments for temperature
            and pressure: SAE J1263 as quoted publicly. Shapley shares of a variance: Owen 2014 (SIAM/ASA
            Journal on Uncertainty Quantification 2), from memory. All defaults by class, and the limits of
            humidity, wheel and tyre: common practice, no source; mesh efficiencies as under “Power and
            torque”.
          </>
        }
        limits="It holds for this car on these days and says nothing about another fuel, temperature, gear or engine speed. It does not hold what the model leaves out: drag of the gearbox that differs between neutral and gear, tyres that roll otherwise under drive, a weather formula that does not fit this engine. It is kept apart from the uncertainty of a difference, in which most parts cancel."
      >
        <p>
          Each peak has a budget: for each thing that could be wrong, by how much of the power, as one
          standard deviation. Run page and comparison list the parts with the figure’s origin; the table below
          has them all.
        </p>
        <Formula>± = 2 · √(u₁² + u₂² + …)</Formula>
        <p>
          Wind, slope and resistance are told apart by the same coast-downs, so their errors hang together:
          with runs in one direction, more wind and less resistance fit as well. Each gets what knowing it
          exactly would take off the variance, averaged over all orders in which the three could become known.
          These shares are never negative and add up to the whole.
        </p>
        <p>
          What the runs of a side have in common does not average out over them and is taken whole; what
          differs from run to run shows in their scatter. A side with one run, beside another with one, has no
          scatter to show: its noise and gusts are stated instead, and the budget has no line for
          repeatability.
        </p>
      </Method>
      <div>
        <Table
          caption="Parts of the absolute uncertainty: standard uncertainties, one standard deviation"
          showCaption
          dense
          columns={COLUMNS}
          rows={ROWS}
          rowKey={(row) => row.part}
        />
      </div>
    </>
  );
}
