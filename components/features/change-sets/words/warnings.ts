import { counted, listed } from "@/components/ui/data/number-text";
import type { Tone } from "@/components/ui/status/tone-sign";
import { type TouchedMark, touchedMarks } from "@/lib/calibration/changes/relevance";
import type { ChangeSet } from "@/lib/calibration/changes/types";
import type { RevisionChangesView } from "@/lib/services/change-sets/schema";

/** Something to know before the list is read. */
export interface Warning {
  tone: Tone;
  title: string;
  text: string;
  /** Where it leads: the bytes outside the description, or a setting of the programme. */
  to?: "bytes" | "regions" | "marks";
}

/** Names that are printed at most in one sentence. */
const MOST_NAMES = 6;

function namesText(names: readonly string[]): string {
  const rest = names.length - MOST_NAMES;
  return rest > 0 ? `${names.slice(0, MOST_NAMES).join(", ")} and ${rest} more` : listed(names);
}

/** What must be known of a change set first, the gravest first. */
export function warningsOf(view: RevisionChangesView): Warning[] {
  const { changes, fingerprintHolds, integrity, epk, contradiction } = view;
  const broken = (integrity ?? []).filter(({ state }) => state !== "holds");
  return [
    ...(fingerprintHolds === false
      ? [
          problem(
            "The stored image is damaged",
            "Its bytes no longer have the fingerprint under which they were kept.",
          ),
        ]
      : []),
    ...broken.map(({ name, sentence }) => ({
      ...problem(`Checksum region ${name}`, sentence),
      to: "regions" as const,
    })),
    ...(epk?.state === "mismatch"
      ? [
          problem(
            "Description and image do not belong together",
            `The description expects the identification ${quoted(epk.expected)}, the image holds ${quoted(epk.found)}.`,
          ),
        ]
      : []),
    ...(contradiction ? [problem("The declaration is contradicted", contradiction)] : []),
    ...(changes ? changeWarnings(changes, touchedMarks(changes, view.marks), view) : []),
  ];
}

const problem = (title: string, text: string): Warning => ({ tone: "problem", title, text });
const quoted = (text: string | null) => (text === null ? "nothing readable" : `“${text}”`);

function changeWarnings(
  set: ChangeSet,
  touched: readonly TouchedMark[],
  view: RevisionChangesView,
): Warning[] {
  const cells = set.characteristics.flatMap((change) => change.changes);
  const outside = cells.filter(({ limit }) => limit === "below" || limit === "above").length;
  return [
    ...(set.readBy !== "none" && set.uncoveredBytes > 0
      ? [
          {
            tone: "caution" as const,
            title: "Changed outside the description",
            text: `${counted(set.uncoveredBytes, "byte")} in ${counted(set.uncoveredRanges, "place")} belong to no characteristic.`,
            to: "bytes" as const,
          },
        ]
      : []),
    ...(view.checksumBytes > 0
      ? [
          {
            tone: "plain" as const,
            title: "The stored checksum changed with it",
            text: `${counted(view.checksumBytes, "byte")} of declared checksum regions.`,
          },
        ]
      : []),
    ...touched.map(({ mark, characteristics }) => ({
      tone: "caution" as const,
      to: "marks" as const,
      title: mark.relevance === "emission" ? "Emission-relevant" : "Safety-relevant",
      text: `${mark.set === "function" ? `Function ${mark.name}` : mark.name} is touched: ${namesText(characteristics)}.${mark.note ? ` ${mark.note}` : ""}`,
    })),
    ...(outside > 0
      ? [
          {
            tone: "caution" as const,
            title: "Outside the description's limits",
            text: `${counted(outside, "changed cell")} hold a value outside the limits.`,
          },
        ]
      : []),
    ...readByWarning(set, view),
    ...set.problems.map((text) => ({ tone: "caution" as const, title: "While reading", text })),
  ];
}

/** Says by whose description both images were read where only one side has one. */
function readByWarning({ readBy }: ChangeSet, { revision, against }: RevisionChangesView): Warning[] {
  if (!against || (readBy !== "a" && readBy !== "b")) return [];
  const [has, lacks] = readBy === "b" ? [revision, against] : [against, revision];
  return [
    {
      tone: "plain",
      title: `Read by the description of R${has.number}`,
      text: `R${lacks.number} has none of its own: where its characteristics lie is taken from R${has.number}.`,
    },
  ];
}
