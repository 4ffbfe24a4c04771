import { ASPIRATION_WORDS, DRIVE_WORDS, ENGINE_WORDS } from "@/components/features/programmes/sheet-words";
import { timingLines } from "@/components/features/programmes/timing-words";
import { DescriptionList } from "@/components/ui/data/description-list";
import { numberText } from "@/components/ui/data/number-text";
import { Quantity } from "@/components/ui/data/quantity";
import type { Figure, VehicleSheetFigures } from "@/lib/measure/vehicle/vehicle-sheet";
import { toCampaignVehicle } from "@/lib/measure/vehicle/vehicle-sheet";

const NOT_KNOWN = <span className="text-ink2">not known</span>;

/** A figure as it was written: no digit added, none taken away. */
function figure(written: Figure | null, unit: string) {
  if (!written) return NOT_KNOWN;
  const decimals = String(written.value).split(".")[1]?.length ?? 0;
  return <Quantity value={written.value} halfWidth={written.uncertainty} unit={unit} decimals={decimals} />;
}

const single = (value: number | null, unit: string) =>
  figure(value === null ? null : { value, uncertainty: null }, unit);

/** The mass that a result stands on: the sum of the parts. `coverage` times its standard uncertainty is printed as ±. */
export function TestMass({ sheet, coverage }: { sheet: VehicleSheetFigures; coverage: 1 | 2 }) {
  const vehicle = toCampaignVehicle(sheet);
  const standard = vehicle.mass_uncertainty_kg ?? null;
  return (
    <Quantity
      value={vehicle.mass_kg}
      halfWidth={standard === null ? null : coverage * standard}
      unit="kg"
      decimals={0}
    />
  );
}

/** Every figure of one version of a vehicle sheet, to read. */
export function VehicleSheetView({ sheet }: { sheet: VehicleSheetFigures }) {
  return (
    <>
      <SheetFigures sheet={sheet} />
      <p className="mt-4 text-13 text-ink2">
        ± on this sheet is the standard uncertainty, as it was written; ± on results is about 95 %, twice
        that.
      </p>
    </>
  );
}

function SheetFigures({ sheet }: { sheet: VehicleSheetFigures }) {
  const read = sheet.speedAtRpm;
  return (
    <DescriptionList
      items={[
        { term: "Vehicle", description: sheet.label },
        { term: "Engine", description: ENGINE_WORDS[sheet.engine] },
        { term: "Charging", description: ASPIRATION_WORDS[sheet.aspiration] },
        { term: "Driven wheels", description: DRIVE_WORDS[sheet.drive] },
        { term: "Displacement", description: single(sheet.displacementL, "L") },
        { term: "Idle speed", description: single(sheet.idleRpm, "1/min") },
        { term: "Speed limiter", description: single(sheet.redlineRpm, "1/min") },
        { term: "Test mass", description: <TestMass sheet={sheet} coverage={1} /> },
        ...sheet.massPartsKg.map((part) => ({
          term: <span className="pl-4">{part.part}</span>,
          description: figure(part, "kg"),
        })),
        {
          term: "Gear ratios",
          description:
            sheet.gearRatios.length === 0 ? (
              NOT_KNOWN
            ) : (
              <span className="tabular">{sheet.gearRatios.join("  ")}</span>
            ),
        },
        { term: "Final drive", description: single(sheet.finalDrive, "") },
        { term: "Tyre marking", description: sheet.tyre ?? NOT_KNOWN },
        { term: "Rolling circumference", description: figure(sheet.rollingCircumferenceM, "m") },
        {
          term: "Road speed read off",
          description: read ? (
            <span className="tabular">
              {read.speedKmh} km/h at {numberText(read.rpm)} 1/min in gear {read.gear}
            </span>
          ) : (
            NOT_KNOWN
          ),
        },
        { term: "Inertia of the engine", description: figure(sheet.engineInertiaKgm2, "kg m²") },
        { term: "Inertia of all wheels", description: figure(sheet.wheelInertiaKgm2, "kg m²") },
        { term: "Efficiency of the gear meshes", description: figure(sheet.meshEfficiency, "") },
        ...(sheet.engine === "compression ignition"
          ? [
              {
                term: "Injected quantity",
                description: single(sheet.fuelQuantityMgPerLCycle, "mg/L and cycle"),
              },
            ]
          : []),
        ...timingLines(sheet.timings).map(({ term, words }) => ({
          term,
          description: words ?? <span className="text-ink2">none</span>,
        })),
      ]}
    />
  );
}
