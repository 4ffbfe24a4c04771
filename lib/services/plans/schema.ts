import type { z } from "zod";
import type { NullTestOutcome } from "@/lib/compare/null-test";
import { MOST_TWINS, type OrderCard } from "@/lib/compare/plan/order-card";
import { type CardCost, type DriveFigures, USUAL_DRIVE } from "@/lib/compare/plan/plan-cost";
import type { PlanBasis, Scatter } from "@/lib/compare/plan/plan-scatter";
import type { ShownBy, TwinsNeeded } from "@/lib/compare/plan/plan-twins";
import type { RepeatabilityResult } from "@/lib/measure/types";
import type { Verdict } from "@/lib/policy/actor";
import { requiredNumber } from "@/lib/services/number-field";

/** What a plan is asked for. It lives in the page's address, so that a link shows the same plan and nothing needs saving. */
const FIELDS = {
  wanted: requiredNumber({ min: 0.1, max: 30, unit: "%" }),
  strip: requiredNumber({ min: 100, max: 20_000, unit: "m" }),
  leg: requiredNumber({ min: 0.5, max: 60, unit: "min" }),
  write: requiredNumber({ min: 0, max: 240, unit: "min" }),
  fuel: requiredNumber({ min: 1, max: 300, unit: "l/100 km" }),
} satisfies Record<string, z.ZodType<number>>;

export type PlanField = keyof typeof FIELDS;

/** Wanted difference when nothing is said: the loss that the starting gate plan still has to tell from none. */
const WANTED_PCT = 1;

export interface PlanQuery {
  wantedPct: number;
  /** Twins a side that somebody chose; null: what is needed. */
  twins: number | null;
  drive: DriveFigures;
  /** As typed, or what stands for an empty field. */
  texts: Record<PlanField, string>;
  errors: Partial<Record<PlanField, string>>;
}

type Query = Record<string, string | string[] | undefined>;

/**
 * Reads the address of the plan page. A field that is empty or missing takes its usual value, one that makes no sense too, and
 * says so.
 * @param stripM length of the strip driven last, m; null when none was written down
 */
export function readPlanQuery(query: Query, stripM: number | null): PlanQuery {
  const usual: Record<PlanField, number> = {
    wanted: WANTED_PCT,
    strip: stripM ?? USUAL_DRIVE.stripM,
    leg: USUAL_DRIVE.minutesPerLeg,
    write: USUAL_DRIVE.minutesPerWrite,
    fuel: USUAL_DRIVE.litresPer100Km,
  };
  const texts = {} as Record<PlanField, string>;
  const values = { ...usual };
  const errors: PlanQuery["errors"] = {};
  for (const name of Object.keys(FIELDS) as PlanField[]) {
    const raw = query[name];
    const text = typeof raw === "string" ? raw.trim() : "";
    texts[name] = text === "" ? String(usual[name]) : text;
    const parsed = FIELDS[name].safeParse(texts[name]);
    if (parsed.success) values[name] = parsed.data;
    else
      errors[name] =
        `${parsed.error.issues[0]?.message ?? "Makes no sense."} Shown for ${usual[name]} instead.`;
  }
  const twins = Number(query.twins);
  return {
    wantedPct: values.wanted,
    twins: Number.isInteger(twins) && twins >= 1 && twins <= MOST_TWINS ? twins : null,
    drive: {
      stripM: values.strip,
      minutesPerLeg: values.leg,
      minutesPerWrite: values.write,
      litresPer100Km: values.fuel,
    },
    texts,
    errors,
  };
}

/** One number of twins: what it shows and what it costs. */
export interface PlanRow extends ShownBy {
  cost: CardCost;
}

/** Everything the plan page shows. */
export interface PlanView {
  programme: { id: string; name: string };
  query: PlanQuery;
  basis: PlanBasis;
  /** Road days that the scatter was pooled from. */
  days: number;
  needed: TwinsNeeded;
  /** The same at both ends of what the scatter can be; null for starting values. */
  neededBetween: { fewest: TwinsNeeded; most: TwinsNeeded } | null;
  rows: PlanRow[];
  chosen: PlanRow;
  card: OrderCard;
  mayOpenRoadDay: Verdict;
}

/** What one road day says of the workshop's own scatter. */
export interface ScatterDay {
  roadDayId: string;
  day: string;
  stripName: string;
  sample: boolean;
  /** Null while no comparison that uses the day has a result. */
  figures: RepeatabilityResult | null;
  /** The comparison that the figures are from, and its analysis version. */
  comparison: { id: string; a: number; b: number; analysisVersion: string } | null;
  /** What came of it where the day is a null test; null on other days and while nothing is computed. */
  nullTest: NullTestOutcome | null;
  isNullTest: boolean;
}

/** The scatter of one strip over its road days. */
export interface StripScatter {
  stripName: string;
  days: ScatterDay[];
  point: Scatter | null;
  range: Scatter | null;
}

export interface RepeatabilityView {
  programme: { id: string; name: string };
  strips: StripScatter[];
}
