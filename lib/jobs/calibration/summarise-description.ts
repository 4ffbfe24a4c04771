import type { Description } from "@/lib/calibration/a2l/types";
import type { DescriptionSummary } from "@/lib/services/descriptions/schema";

const MOST_LISTED = 200;
const MOST_SETS = 1000;

/** What pages tell of a description, without what is in it. Long lists are cut after 200 entries. */
export function summariseDescription(description: Description): DescriptionSummary {
  const { version, project, modules, notRead, missingIncludes, notes } = description;
  const counts: Record<string, number> = {};
  for (const module of modules) {
    for (const { type } of module.characteristics.values()) counts[type] = (counts[type] ?? 0) + 1;
    if (module.axisPoints.size > 0) counts.AXIS_PTS = (counts.AXIS_PTS ?? 0) + module.axisPoints.size;
  }
  return {
    version,
    project,
    modules: modules.map(({ name, epk }) => ({ name, epk: epk?.text ?? null })),
    counts,
    functions: modules.reduce((sum, { functions }) => sum + functions.size, 0),
    groups: modules.reduce((sum, { groups }) => sum + groups.size, 0),
    setNames: [
      ...new Set([
        ...modules.flatMap(({ functions }) => [...functions.keys()]),
        ...modules.flatMap(({ groups }) => [...groups.keys()]),
      ]),
    ].slice(0, MOST_SETS),
    notRead: notRead.slice(0, MOST_LISTED),
    notReadCount: notRead.length,
    missingIncludes: missingIncludes.slice(0, MOST_LISTED),
    notes: notes
      .slice(0, MOST_LISTED)
      .map(({ message, file, line }) =>
        line === null ? `${file}: ${message}` : `${file}, line ${line}: ${message}`,
      ),
  };
}
