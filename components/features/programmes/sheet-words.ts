import type { VehicleSheetFigures } from "@/lib/measure/vehicle/vehicle-sheet";

export const ENGINE_WORDS: Record<VehicleSheetFigures["engine"], string> = {
  "spark ignition": "Spark ignition (petrol)",
  "compression ignition": "Compression ignition (diesel)",
};
export const ASPIRATION_WORDS: Record<VehicleSheetFigures["aspiration"], string> = {
  natural: "Natural aspiration",
  turbo: "Turbocharged",
  supercharged: "Supercharged",
};
export const DRIVE_WORDS: Record<VehicleSheetFigures["drive"], string> = {
  FWD: "Front wheels",
  RWD: "Rear wheels",
  AWD: "All wheels",
};

/** Entries of a list of choices from such words. */
export function choices(words: Record<string, string>): { value: string; label: string }[] {
  return Object.entries(words).map(([value, label]) => ({ value, label }));
}
