import type { GateExtras, GateWords } from "@/components/features/programmes/gate-field-words";
import type {
  CoverageGate,
  DeclarationGate,
  IntegrityGate,
  StepLimitGate,
  TouchedGate,
} from "@/lib/gates/plan";

type CalibrationGate = TouchedGate | StepLimitGate | CoverageGate | IntegrityGate | DeclarationGate;

/** What a gate on the calibration asks, in words, and what a lead sets. */
export function calibrationGateWords(gate: CalibrationGate): GateWords {
  switch (gate.kind) {
    case "touched":
      return {
        title: "Only what may change has changed",
        note: "Against what stands. Without a description nobody can tell, so the gate has too little.",
        numbers: [],
        lists: [
          {
            name: "allowed.functions",
            label: "Functions that may change",
            hint: "As the description names them, one a line. A function allows everything in it.",
            empty: "",
          },
          {
            name: "allowed.characteristics",
            label: "Characteristics that may change",
            hint: "One a line. With both empty, anything described may change.",
            empty: "",
          },
        ],
        ticks: [{ name: "uncovered", label: "Bytes outside the description may change" }],
      };
    case "step_limit":
      return {
        title: "Steps and moves in changed tables",
        note: "The largest step between neighbouring cells of which one changed, and the largest move of a cell. In % of the span of the table's values before (of the value itself where all are alike), or in its own unit.",
        numbers: [
          { name: "maxNeighbourStep", label: "step" },
          { name: "movedAtMost", label: "move" },
        ],
        lists: [
          {
            name: "scope",
            label: "Tables or functions",
            hint: "As the description names them, one a line. Empty: all that changed.",
            empty: "all changed tables",
          },
        ],
        choices: [
          {
            name: "measure",
            label: "Measured in",
            options: [
              { value: "share", label: "% of the span before" },
              { value: "unit", label: "the table's own unit" },
            ],
          },
          {
            name: "against",
            label: "Against",
            options: [
              { value: "standing", label: "what stands" },
              { value: "parent", label: "the parent" },
            ],
          },
        ],
      };
    case "coverage":
      return {
        title: "Changed cells visited by usable runs",
        note: "Runs of any kind. A table whose axes are not linked to channels counts as not visited; single values are left out.",
        numbers: [{ name: "atLeastPct", label: "at least", unit: "%" }],
      };
    case "integrity":
      return {
        title: "Image matches its fingerprint and checksum regions",
        note: "Regions are declared once per programme.",
        numbers: [],
      };
    case "declaration":
      return {
        title: "Declaration on emission and safety agrees with the changes",
        note: "Against the functions and characteristics marked for this programme.",
        numbers: [],
      };
  }
}

function valueAt(gate: object, path: string): unknown {
  return path.split(".").reduce<unknown>((at, name) => (at as Record<string, unknown> | null)?.[name], gate);
}

/** What a lead set beside the numbers, to read. */
export function extrasText(gate: object, { lists = [], choices = [], ticks = [] }: GateExtras): string[] {
  return [
    ...lists.flatMap(({ name, label, empty }) => {
      const names = valueAt(gate, name);
      const text = Array.isArray(names) && names.length > 0 ? `${label}: ${names.join(", ")}` : empty;
      return text ? [text] : [];
    }),
    ...choices.flatMap(({ name, label, options }) => {
      const chosen = options.find(({ value }) => value === valueAt(gate, name));
      return chosen ? [`${label.toLowerCase()} ${chosen.label}`] : [];
    }),
    ...ticks.flatMap(({ name, label }) => (valueAt(gate, name) === true ? [label] : [])),
  ];
}
