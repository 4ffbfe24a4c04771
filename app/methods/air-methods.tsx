import { Formula, Method } from "@/app/methods/method";
import { type Column, Table } from "@/components/ui/data/table";
import { FACTOR_RULES, FACTOR_VERSION, type FactorRule } from "@/lib/measure/air/atmosphere";

interface FactorRow extends FactorRule {
  id: string;
}

const ROWS: readonly FactorRow[] = Object.entries(FACTOR_RULES).map(([id, rule]) => ({ id, ...rule }));

const COLUMNS: Column<FactorRow>[] = [
  {
    key: "id",
    header: "Id",
    rowHeader: true,
    cell: (row) => <code className="tabular text-13">{row.id}</code>,
  },
  { key: "formula", header: "Factor", className: "min-w-64", cell: (row) => row.formula },
  { key: "range", header: "Permitted range", className: "min-w-40", cell: (row) => rangeText(row.range) },
  { key: "source", header: "Source", className: "min-w-56 text-ink2", cell: (row) => row.source },
];

function rangeText(range: FactorRule["range"]): string {
  if (!range) return "none stated";
  const [factor, temperature, pressure] = [range.factor, range.tempC, range.dryKpa].map(
    ([a, b]) => `${a} to ${b}`,
  );
  return `factor ${factor}; ${temperature} °C; ${pressure} kPa dry`;
}

/** Weather: dry pressure, the factors, and when none is applied. */
export function AirMethods() {
  return (
    <>
      <Method
        id="air"
        title="Dry pressure and density of the air"
        source="Saturation pressure: Magnus form with the coefficients of WMO-No. 8 (from memory). Gas constants: public code for air data. Checked against CIPM-2007 (Picard et al., Metrologia 45 (2008) 149)."
        limits="The pressure must be the absolute one at the car, not the one reduced to sea level. Against CIPM-2007 the density is within 0.05 %."
      >
        <Formula>
          p<sub>v</sub> = RH · 0.6112 kPa · exp(17.62 t / (243.12 + t)), &nbsp; p<sub>d</sub> = B − p
          <sub>v</sub>
        </Formula>
        <Formula>
          ρ = p<sub>d</sub> / (287.058 · T) + p<sub>v</sub> / (461.495 · T)
        </Formula>
        <p>B is the station pressure, t the temperature in °C, RH the relative humidity from 0 to 1.</p>
      </Method>
      <Method
        id="factors"
        title="Weather factors"
        source="As named in the table. The texts of SAE, ISO, DIN and JIS are paid and were not read here: “as commonly published” means just that. Twinpass claims no conformity with any of them."
        limits="A factor models the air, not the engine. Outside its permitted range the figure is flagged. Curves with different factors are never laid over each other: the same pull reads about 4 % higher by one old rating than by another."
      >
        <p>
          A factor refers power to standard air; the same factor holds for torque. It is never applied in
          silence: every figure carries the factor’s id, its value, the weather, and whether it was inside its
          range, and the uncorrected curve is kept.
        </p>
        <Formula>
          P<sub>referred</sub> = factor · P<sub>as driven</sub>
        </Formula>
        <p>
          Left to itself, Twinpass uses <code className="tabular">j1349_eta85</code> for naturally aspirated
          spark ignition; nothing for boosted spark ignition, whose control holds the manifold pressure and
          makes up for the weather, so that a factor would over-correct; and for compression ignition a diesel
          form, if the fuel quantity is known, else nothing. For a difference, runs taken in turns on the same
          day beat any factor: in equal air it cancels.
        </p>
        <p>
          For compression ignition the air factor f<sub>a</sub> is raised to f<sub>m</sub> = 0.036 · q
          <sub>c</sub> − 1.14 (0.2 below 37.2 and 1.2 above 65 mg per litre and cycle). For turbocharged
          engines published texts differ in the exponent of temperature, 1.2 or 1.5; both are held, and the
          result says which was used.
        </p>
      </Method>
      <div>
        <Table
          caption={`Weather factors, formula version ${FACTOR_VERSION}. pd: dry pressure; t: °C; tF: °F.`}
          showCaption
          columns={COLUMNS}
          rows={ROWS}
          rowKey={(row) => row.id}
          dense
        />
      </div>
    </>
  );
}
