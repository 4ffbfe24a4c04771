import type { RunSignals } from "@/lib/measure/run/run-signals";
import { between, SPEED_SOURCES, type SpeedModel } from "@/lib/measure/speed/speed-model";

/** Mean speed and acceleration over a short block, by a weighted straight line through every speed channel. */
export interface SpeedBlock {
  fromS: number;
  toS: number;
  speedMps: number;
  accelerationMps2: number;
  accelerationVariance: number;
}

/** Weighted sums of a straight line over time. */
interface LineSums {
  used: number;
  s0: number;
  s1: number;
  s2: number;
  r0: number;
  r1: number;
}

/** Samples farther than this many standard deviations from a block's first line are reading errors. */
const OUTLIER_DEVIATIONS = 5;

/**
 * Cuts a coast-down into blocks of about `lengthS` and fits a straight line to all free-rolling speed channels of each
 * (engine speed is left out: the engine is off the wheels), twice: the second time without reading errors.
 * Blocks with fewer than 4 samples are left out.
 */
export function coastBlocks(
  signals: RunSignals,
  model: SpeedModel,
  fromS: number,
  toS: number,
  lengthS: number,
): SpeedBlock[] {
  const count = Math.max(1, Math.round((toS - fromS) / lengthS));
  const blocks: SpeedBlock[] = [];
  for (let k = 0; k < count; k++) {
    const start = fromS + (k * (toS - fromS)) / count;
    const end = fromS + ((k + 1) * (toS - fromS)) / count;
    const first = lineOf(lineSums(signals, model, start, end, null));
    const line = first && lineOf(lineSums(signals, model, start, end, first));
    if (line) blocks.push({ fromS: start, toS: end, ...line });
  }
  return blocks;
}

type Line = Pick<SpeedBlock, "speedMps" | "accelerationMps2" | "accelerationVariance">;

function lineOf({ used, s0, s1, s2, r0, r1 }: LineSums): Line | null {
  const spread = s2 - (s1 * s1) / s0;
  if (used < 4 || !(spread > 0)) return null;
  const slope = (r1 - (s1 * r0) / s0) / spread;
  return { speedMps: (r0 - slope * s1) / s0, accelerationMps2: slope, accelerationVariance: 1 / spread };
}

/** Sums over the samples between two times; those far from `expected` (time from the middle) are left out. */
function lineSums(
  signals: RunSignals,
  model: SpeedModel,
  start: number,
  end: number,
  expected: Line | null,
): LineSums {
  const sums: LineSums = { used: 0, s0: 0, s1: 0, s2: 0, r0: 0, r1: 0 };
  const middle = (start + end) / 2;
  for (const source of SPEED_SOURCES) {
    const channel = signals[source];
    const reading = model.channels.get(source);
    if (!channel || !reading || source === "engineSpeed") continue;
    const weight = 1 / reading.deviationMps ** 2;
    const [a, b] = between(channel, start + reading.lagS, end + reading.lagS);
    for (let i = a; i < b; i++) {
      const t = channel.times[i] - reading.lagS - middle;
      const v = channel.values[i] / reading.scale;
      if (expected) {
        const residual = v - expected.speedMps - expected.accelerationMps2 * t;
        // A block's line is straight and the coast-down is not: bends stay far below a tenth of a metre a second.
        if (Math.abs(residual) > Math.max(0.1, OUTLIER_DEVIATIONS * reading.deviationMps)) continue;
      }
      sums.used++;
      sums.s0 += weight;
      sums.s1 += weight * t;
      sums.s2 += weight * t * t;
      sums.r0 += weight * v;
      sums.r1 += weight * t * v;
    }
  }
  return sums;
}
