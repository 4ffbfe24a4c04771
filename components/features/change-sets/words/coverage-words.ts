import { counted, numberText } from "@/components/ui/data/number-text";
import type { Coverage, MapCoverage } from "@/lib/calibration/coverage/types";

/** What coverage says of one change: its table, or why it can't be told; null where it says nothing of it. */
export type ChangeCoverage = { table: MapCoverage; reason: null } | { table: null; reason: string };

/** Looks one change up in a coverage. */
export function coverageOf(coverage: Coverage | null, name: string): ChangeCoverage | null {
  if (!coverage) return null;
  const table = coverage.maps.find((map) => map.name === name);
  if (table) return { table, reason: null };
  const silent = coverage.notTold.find((entry) => entry.name === name);
  return silent ? { table: null, reason: silent.reason } : null;
}

/** "12 of 38 changed cells never visited", or that all were. */
export function visitedText({ changedCells, changedNeverVisited }: MapCoverage): string {
  const missing = changedNeverVisited.length;
  if (missing === 0) return `all ${counted(changedCells, "changed cell")} visited`;
  return `${numberText(missing)} of ${counted(changedCells, "changed cell")} never visited`;
}
