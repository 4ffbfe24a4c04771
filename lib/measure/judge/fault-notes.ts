import type { SensorFault } from "@/lib/measure/judge/sensor-faults";
import { fixed } from "@/lib/measure/judge/words";
import type { Segments } from "@/lib/measure/run/find-segments";
import type { RunSignals } from "@/lib/measure/run/run-signals";
import type { Note } from "@/lib/measure/types";

const NAMES: Readonly<Partial<Record<SensorFault["channel"], string>>> = {
  wheel_speed_undriven: "undriven wheel speed",
  wheel_speed_driven: "driven wheel speed",
  gps_speed: "GPS speed",
  engine_speed: "engine speed",
};
const CODES = { frozen: "sensor_frozen", dropout: "sensor_dropout", jump: "reading_errors" } as const;
/** More faults of one kind than this are told in one sentence. */
const TOLD_ONE_BY_ONE = 3;

/** Another channel that tells road speed through the stretch. */
function isCarried(signals: RunSignals, fault: SensorFault): boolean {
  const others = [
    fault.channel === "wheel_speed_undriven" ? null : signals.undriven,
    fault.channel === "gps_speed" ? null : signals.gps,
    fault.channel === "wheel_speed_driven" ? null : signals.driven,
  ];
  return others.some((other) => other?.times.some((t) => t >= fault.from_s && t <= fault.to_s) ?? false);
}

/**
 * Frozen stretches, dropouts and reading errors of the speed channels. Their samples are left out in any case; where no other channel
 * tells the road speed inside the pull, the stretch is masked, else it warns.
 */
export function faultNotes(signals: RunSignals, segments: Segments | null): Note[] {
  const notes: Note[] = [];
  for (const kind of ["frozen", "dropout", "jump"] as const) {
    for (const [channel, name] of Object.entries(NAMES)) {
      const faults = signals.faults.filter((f) => f.kind === kind && f.channel === channel);
      if (faults.length === 0) continue;
      const masks = (fault: SensorFault) =>
        kind !== "jump" &&
        !isCarried(signals, fault) &&
        channel !== "engine_speed" &&
        segments?.pull != null &&
        fault.to_s > segments.pull.from_s &&
        fault.from_s < segments.pull.to_s;
      const single = faults.length <= TOLD_ONE_BY_ONE ? faults : faults.filter(masks);
      for (const fault of single) {
        notes.push({
          code: CODES[kind],
          consequence: masks(fault) ? "masked" : "warned",
          from_s: fault.from_s,
          to_s: fault.to_s,
          message: sentence(name, kind, fault, masks(fault)),
        });
      }
      if (faults.length <= TOLD_ONE_BY_ONE) continue;
      const samples = faults.reduce((sum, f) => sum + f.samples, 0);
      notes.push({
        code: CODES[kind],
        consequence: "warned",
        from_s: faults[0].from_s,
        to_s: faults[faults.length - 1].to_s,
        message: `The ${name} ${WORDS[kind]} in ${faults.length} places, ${samples} samples in all; they are left out. Check the sensor and its cable.`,
      });
    }
  }
  return notes;
}

const WORDS = {
  frozen: "stands still while the car does not",
  dropout: "falls to nothing",
  jump: "jumps away",
} as const;

function sentence(name: string, kind: SensorFault["kind"], fault: SensorFault, masked: boolean): string {
  const length = fixed(fault.to_s - fault.from_s, 2);
  const samples = fault.samples === 1 ? "one sample" : `${fault.samples} samples`;
  const what = kind === "jump" ? samples : `${length} s`;
  const how =
    kind === "jump"
      ? `The ${name} jumps away from its neighbours in ${what}`
      : `The ${name} ${WORDS[kind]} for ${what}`;
  const then = masked
    ? "no other channel tells the road speed there, so the engine speeds in it are left out"
    : "those samples are left out, the rest carries the stretch";
  return `${how}; ${then}. Check the sensor and its cable.`;
}
