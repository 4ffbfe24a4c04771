/** One number of a gate as its form asks for it. */
export interface GateNumber {
  name: string;
  label: string;
  unit?: string;
}

/** What a gate's form asks beside numbers; `name` may lead into a member: "allowed.functions". */
export interface GateExtras {
  /** Names, one a line; `empty` is what no name means, in words. */
  lists?: { name: string; label: string; hint: string; empty: string }[];
  choices?: { name: string; label: string; options: { value: string; label: string }[] }[];
  ticks?: { name: string; label: string }[];
}

export interface GateWords extends GateExtras {
  title: string;
  note?: string;
  numbers: GateNumber[];
}

/** A plan as its form holds it: each gate a record of what is typed. */
export interface PlanFields {
  plan: 1;
  gates: ({ id: string; level: string } & Record<string, unknown>)[];
}
