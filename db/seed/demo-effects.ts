import type { Effect } from "@/db/seed/demo-logs";
import type { EngineModel } from "@/lib/simulate/record-engine";

/** A smooth hill of a gain or loss over a range of engine speed. */
export function hill(share: number, fromRpm: number, toRpm: number, edgeRpm = 350): (rpm: number) => number {
  const rise = (x: number) => 0.5 * (1 + Math.tanh(x / (edgeRpm / 2)));
  return (rpm) => share * rise(rpm - fromRpm) * rise(toRpm - rpm);
}

/** How the image as found runs the invented engine. */
export const AS_FOUND: EngineModel = {
  lambda: (rpm) => 0.875 - 0.03 * Math.min(1, Math.max(0, (rpm - 3000) / 3000)),
  boostKpa: (rpm) => 196 - 22 * Math.min(1, Math.max(0, (rpm - 4800) / 1800)),
  overshootKpa: 9,
  knocksPerS: () => 0.35,
  knockStepDeg: 0.8,
  exhaustC: (rpm) => 790 + 0.03 * (rpm - 1500),
};

/** An image that runs the engine as found but for what is named. */
const changed = (gain: Effect["gain"], engine: Partial<EngineModel>): Effect => ({
  gain,
  engine: { ...AS_FOUND, ...engine },
});

/** What the images of the story do to the invented car: torque, and how near the engine runs to its limits. */
export const EFFECTS = {
  asFound: changed(() => 0, {}),
  // More air, a little leaner: hotter, and knock is called back more often.
  midRange: changed(hill(0.055, 2300, 4700), {
    lambda: (rpm) => AS_FOUND.lambda(rpm) + hill(0.008, 2300, 4700)(rpm),
    boostKpa: (rpm) => AS_FOUND.boostKpa(rpm) + hill(11, 2300, 4700)(rpm),
    overshootKpa: 11,
    knocksPerS: (rpm) => 0.35 + hill(0.4, 2300, 4700)(rpm),
    exhaustC: (rpm) => AS_FOUND.exhaustC(rpm) + 20,
  }),
  // Later ignition: no knock at the top, and the heat goes into the exhaust.
  topEnd: changed(hill(-0.045, 5400, 7000), {
    knocksPerS: (rpm) => (rpm > 5400 ? 0 : 0.35),
    exhaustC: (rpm) => AS_FOUND.exhaustC(rpm) + hill(60, 5200, 7000)(rpm),
  }),
  ignition: changed((rpm: number) => 0.012 + hill(0.038, 2300, 4600)(rpm), {
    boostKpa: (rpm) => AS_FOUND.boostKpa(rpm) + hill(11, 2300, 4600)(rpm),
    overshootKpa: 11,
    knocksPerS: () => 0.4,
    exhaustC: (rpm) => AS_FOUND.exhaustC(rpm) + 28,
  }),
  visitor: changed((rpm: number) => 0.03 + hill(0.04, 2300, 4600)(rpm), {
    lambda: (rpm) => AS_FOUND.lambda(rpm) + 0.005,
    boostKpa: (rpm) => AS_FOUND.boostKpa(rpm) + hill(14, 2300, 4600)(rpm),
    overshootKpa: 12,
    knocksPerS: () => 0.5,
    exhaustC: (rpm) => AS_FOUND.exhaustC(rpm) + 34,
  }),
} satisfies Record<string, Effect>;
