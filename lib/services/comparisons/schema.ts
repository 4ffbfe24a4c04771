import { z } from "zod";
import type { CampaignResult, CampaignSettings } from "@/lib/measure/types";

/** What may be chosen for the weather factor, with the words of the page. */
export const FACTOR_WORDS = {
  auto: "Automatic: by engine and charging",
  none: "None: as driven on the day",
  j1349_eta85: "J1349-style, mechanical efficiency 0.85 assumed",
  j1349_sqrt: "J1349-style, older form without friction term",
  iso1585_si: "ISO 1585-style, spark ignition",
  din70020: "DIN 70020-style (historical)",
  j607_std: "J607-style (historical)",
  ci_na: "Compression ignition, natural aspiration",
  ci_turbo_12: "Compression ignition, turbo, exponent 1.2",
  ci_turbo_15: "Compression ignition, turbo, exponent 1.5",
  ci_turbo_liquid: "Compression ignition, turbo, liquid-cooled charge",
} as const satisfies Record<CampaignSettings["factor"], string>;

const FACTORS = Object.keys(FACTOR_WORDS) as [keyof typeof FACTOR_WORDS, ...(keyof typeof FACTOR_WORDS)[]];

/** Widths of the rpm grid to choose from, 1/min. */
export const RPM_STEPS = [25, 50, 100, 200] as const;

/** What a person may set; level and seed are fixed, so that every result of the product reads the same. */
export const comparisonSettings = z.strictObject({
  factor: z.enum(FACTORS, "Choose one of the listed factors."),
  rpmStep: z.coerce
    .number()
    .refine((step) => RPM_STEPS.some((known) => known === step), "Choose one of the listed widths."),
});
export type ComparisonSettings = z.infer<typeof comparisonSettings>;

/** Settings of the comparison that gates and decisions rest on. */
export const STANDARD_SETTINGS: ComparisonSettings = { factor: "auto", rpmStep: 50 };

/** Two-sided level of every band and interval. */
const LEVEL = 0.95;
const SEED = 1;

/** The settings in the spelling of the analysis. */
export function toCampaignSettings(settings: ComparisonSettings): CampaignSettings {
  return { factor: settings.factor, rpm_step: settings.rpmStep, level: LEVEL, seed: SEED };
}

export const openComparisonInput = z
  .strictObject({
    revisionAId: z.uuid("Choose the revision on side A."),
    revisionBId: z.uuid("Choose the revision on side B."),
    settings: comparisonSettings.default(STANDARD_SETTINGS),
  })
  .refine((input) => input.revisionAId !== input.revisionBId, {
    path: ["revisionBId"],
    message: "Side A and side B are the same revision. Choose two.",
  });
export type OpenComparisonInput = z.input<typeof openComparisonInput>;

export const changeSettingsInput = z.strictObject({
  comparisonId: z.uuid(),
  factor: comparisonSettings.shape.factor,
  rpmStep: comparisonSettings.shape.rpmStep,
});

export const comparisonIdInput = z.strictObject({ comparisonId: z.uuid() });

/** What the state route answers; the page polls it while it waits. */
export const comparisonState = z.object({
  state: z.enum(["waiting", "ready", "failed", "stale"]),
  recomputing: z.boolean(),
  inputSha256: z.string(),
});
export type ComparisonState = z.infer<typeof comparisonState>;

/** A revision as one side of a comparison. */
export interface ComparedSide {
  id: string;
  number: number;
  title: string;
  state: string;
  asFound: boolean;
  stands: boolean;
  imageSha256: string;
}

/** Smallest, mean and largest of what was recorded; null when nothing was. */
export interface Spread {
  min: number;
  mean: number;
  max: number;
}

/** Under what the counted runs of one side were driven, in the units that the names state. */
export interface SideConditions {
  runs: number;
  roadDays: { id: string; day: string; stripName: string }[];
  tempC: Spread | null;
  pressureHpa: Spread | null;
  humidityPct: Spread | null;
  massKg: Spread | null;
  gears: number[];
  tyreFrontKpa: Spread | null;
  tyreRearKpa: Spread | null;
  fuel: string[];
  wind: string[];
}

/** One run of a comparison as a list shows it: whether it counts, and why not when it does not. */
export interface RunLine {
  runId: string;
  number: number;
  side: "A" | "B";
  kind: string;
  leg: string;
  order: number;
  gear: number | null;
  roadDayId: string;
  day: string;
  testerName: string | null;
  logSha256: string;
  outcome: "used" | "refused" | "set aside" | "left out" | "not computed yet";
  /** Reasons of a refusal, the reason it was set aside for, or why its road day does not count. */
  why: string[];
  /** Findings that mask or warn. */
  notes: string[];
  /** Crank estimate in the air of the day, also where the sides are referred to reference air. */
  peakKw: number | null;
  /** Its ±, about 95 %; null where none is stated. */
  peakUncertaintyKw: number | null;
}

/** Everything the comparison page shows. Dates are ISO texts. */
export interface ComparisonView extends ComparisonState {
  id: string;
  /** Road day of a null test, where both sides are one image and nothing may be claimed; null where two are compared. */
  nullTestRoadDayId: string | null;
  programme: { id: string; name: string; idleRpm: number | null; redlineRpm: number };
  a: ComparedSide;
  b: ComparedSide;
  settings: CampaignSettings;
  failure: string | null;
  moved: string[];
  /** Stale only because the analysis version went on: the runs, settings and sheet are still those of the result. */
  versionOnly: boolean;
  result: CampaignResult | null;
  computedAt: string | null;
  /** Digest and versions of what the result shown was computed from. */
  basis: { inputSha256: string; sheetVersion: number; analysisVersion: string } | null;
  runs: RunLine[];
  conditions: { A: SideConditions; B: SideConditions };
  /** The same two sides under other settings. */
  others: { id: string; settings: CampaignSettings }[];
}

/** How both sides are called: on a null test one image twice, the second time with a prime. */
export function sideLabels(view: {
  a: { number: number };
  b: { number: number };
  nullTestRoadDayId: string | null;
}): { a: string; b: string } {
  return { a: `R${view.a.number}`, b: `R${view.b.number}${view.nullTestRoadDayId === null ? "" : "′"}` };
}

/** Tells the side of a run by the name that the analysis gives it; null for a run that does not count. */
export function sideOfRun(
  runs: readonly Pick<RunLine, "number" | "side" | "outcome">[],
): (id: string) => "A" | "B" | null {
  const sides = new Map(
    runs.filter((run) => run.outcome === "used").map((run) => [String(run.number), run.side]),
  );
  return (id) => sides.get(id) ?? null;
}
