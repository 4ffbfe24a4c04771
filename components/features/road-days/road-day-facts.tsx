import { DescriptionList } from "@/components/ui/data/description-list";
import { Quantity } from "@/components/ui/data/quantity";

export interface RoadDayFactsProps {
  roadDay: {
    zone: string;
    stripLengthM: number | null;
    driver: string;
    recorder: string;
    tempC: number;
    pressureHpa: number;
    humidityPct: number;
    windNote: string;
    fuelNote: string;
    tyrePressureFrontKpa: number | null;
    tyrePressureRearKpa: number | null;
    massKg: number | null;
  };
  sheetMassKg: number;
}

const known = (value: number | null, unit: string, decimals = 0) =>
  value === null ? "not written down" : <Quantity value={value} unit={unit} decimals={decimals} />;

/** What was written down of a road day. */
export function RoadDayFacts({ roadDay, sheetMassKg }: RoadDayFactsProps) {
  return (
    <DescriptionList
      layout="stacked"
      items={[
        { term: "Air temperature", description: known(roadDay.tempC, "°C", 1) },
        { term: "Station pressure", description: known(roadDay.pressureHpa, "hPa", 1) },
        { term: "Relative humidity", description: known(roadDay.humidityPct, "%") },
        { term: "Wind", description: roadDay.windNote || "not written down" },
        {
          term: "Test mass",
          description:
            roadDay.massKg === null ? (
              <>
                <Quantity value={sheetMassKg} unit="kg" decimals={0} /> (vehicle sheet)
              </>
            ) : (
              known(roadDay.massKg, "kg")
            ),
        },
        {
          term: "Tyres, front and rear",
          description: (
            <>
              {known(roadDay.tyrePressureFrontKpa, "kPa")}, {known(roadDay.tyrePressureRearKpa, "kPa")}
            </>
          ),
        },
        { term: "Fuel", description: roadDay.fuelNote || "not written down" },
        { term: "Strip length", description: known(roadDay.stripLengthM, "m") },
        { term: "Driver", description: roadDay.driver },
        { term: "At the recorder", description: roadDay.recorder },
        { term: "Time zone", description: roadDay.zone },
      ]}
    />
  );
}
