import { z } from "zod";
import type { ChannelKey } from "@/lib/logs/types";
import type { Campaign } from "@/lib/measure/types";

const positive = z.number().positive();
const known = <T extends z.ZodType>(schema: T) => schema.nullable().optional();

const vehicle = z.strictObject({
  label: z.string().default(""),
  engine: z.enum(["spark ignition", "compression ignition"]),
  aspiration: z.enum(["natural", "turbo", "supercharged"]),
  displacement_l: known(positive),
  drive: z.enum(["FWD", "RWD", "AWD"]),
  mass_kg: positive,
  mass_uncertainty_kg: known(z.number().nonnegative()),
  tyre: known(z.string()),
  rolling_circumference_m: known(positive),
  gear_ratios: known(z.array(positive)),
  final_drive: known(positive),
  speed_at_rpm: known(z.strictObject({ gear: z.int().positive(), rpm: positive, speed_kmh: positive })),
  redline_rpm: positive,
  engine_inertia_kgm2: known(positive),
  wheel_inertia_kgm2: known(positive),
  mesh_efficiency: known(z.number().gt(0).max(1)),
  rolling_circumference_uncertainty_m: known(z.number().nonnegative()),
  engine_inertia_uncertainty_kgm2: known(z.number().nonnegative()),
  wheel_inertia_uncertainty_kgm2: known(z.number().nonnegative()),
  mesh_efficiency_uncertainty: known(z.number().nonnegative()),
  qc_mg_per_l_cycle: known(positive),
});

const weather = z.strictObject({
  temp_c: z.number().min(-60).max(70),
  pressure_hpa: z.number().min(400).max(1100),
  rh_pct: z.number().min(0).max(100),
});

/** A channel key inline, or the path of a JSON file that holds one, relative to the campaign file. */
const key = z.union([
  z.string(),
  z.custom<ChannelKey>((value) => typeof value === "object" && value !== null),
]);

const run = z.strictObject({
  id: z.string().min(1),
  file: z.string().min(1),
  key: known(key),
  kind: z.enum(["pull", "coast-down", "sprint"]),
  side: known(z.string().min(1)),
  leg: known(z.enum(["out", "back"])),
  order: known(z.int()),
  gear: known(z.int().positive()),
  started_at: known(z.string()),
  weather: known(weather),
  road_day: known(z.string()),
  mass_kg: known(positive),
});

const speedPair = z
  .union([
    z.strictObject({ from_kmh: z.number().nonnegative(), to_kmh: positive }),
    z.strictObject({ from_mph: z.number().nonnegative(), to_mph: positive }),
  ])
  .refine((pair) => ("from_kmh" in pair ? pair.to_kmh > pair.from_kmh : pair.to_mph > pair.from_mph), {
    message: "the second speed must be above the first",
  });

const settings = z
  .strictObject({
    factor: z
      .enum([
        "auto",
        "none",
        "j1349_eta85",
        "j1349_sqrt",
        "iso1585_si",
        "din70020",
        "j607_std",
        "ci_na",
        "ci_turbo_12",
        "ci_turbo_15",
        "ci_turbo_liquid",
      ])
      .default("auto"),
    rpm_step: z.number().min(5).max(500).default(50),
    rpm_ranges: z
      .array(z.tuple([positive, positive]).refine(([from, to]) => from < to, "must rise, e.g. [2500, 4500]"))
      .max(20)
      .nullish(),
    level: z.number().gt(0.5).lt(1).default(0.95),
    seed: z.int().nonnegative().default(1),
    speed_pairs: known(z.array(speedPair).max(20)),
    distances_m: known(z.array(z.number().min(5).max(5000)).max(20)),
    fall_limit_pct: known(positive),
  })
  .prefault({});

/** The campaign file of campaign.md: unknown fields are errors, null or absent means not known. */
const campaignFile = z
  .strictObject({
    campaign: z.literal(1),
    key: known(key),
    vehicle,
    runs: z.array(run).min(1),
    compare: known(z.strictObject({ a: z.string(), b: z.string() })),
    settings,
  })
  .superRefine((file, context) => {
    const seen = new Set<string>();
    file.runs.forEach(({ id }, k) => {
      if (seen.has(id))
        context.addIssue({ code: "custom", path: ["runs", k, "id"], message: `"${id}" is used twice` });
      seen.add(id);
    });
    for (const side of ["a", "b"] as const) {
      const name = file.compare?.[side];
      if (name !== undefined && !file.runs.some((r) => r.side === name)) {
        context.addIssue({ code: "custom", path: ["compare", side], message: `no run has side "${name}"` });
      }
    }
  });

/** How a run's log is to be read. */
export type KeyReference = string | ChannelKey;

export interface CampaignFile {
  campaign: Campaign;
  /** Channel key of each run by id; absent: the log reader finds the columns itself. */
  keys: Map<string, KeyReference>;
}

/** What is wrong with a campaign file, field by field. */
export class CampaignFileError extends Error {
  override readonly name = "CampaignFileError";
}

/** Reads the text of a campaign file. Throws CampaignFileError naming each wrong field. */
export function parseCampaignFile(text: string): CampaignFile {
  let json: unknown;
  try {
    json = JSON.parse(text.replace(/^\uFEFF/, ""));
  } catch (error) {
    throw new CampaignFileError(`The campaign file is no JSON: ${(error as Error).message}`);
  }
  const parsed = campaignFile.safeParse(json);
  if (!parsed.success) {
    const lines = parsed.error.issues.map((issue) => `${issue.path.join(".") || "file"}: ${issue.message}`);
    throw new CampaignFileError(`The campaign file is wrong:\n${lines.join("\n")}`);
  }
  const { key: shared, runs, ...rest } = parsed.data;
  const keys = new Map<string, KeyReference>();
  const plain = runs.map(({ key: own, ...one }) => {
    const used = own ?? shared;
    if (used) keys.set(one.id, used);
    return one;
  });
  return { campaign: { ...rest, runs: plain }, keys };
}
