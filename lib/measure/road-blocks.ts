import type { RunSignals } from "@/lib/measure/run-signals";
import { between, SPEED_SOURCES, type SpeedModel } from "@/lib/measure/speed-model";

/** Mean speed and acceleration over a short block, by a weighted straight line through every speed channel. */
export interface SpeedBlock {
  fromS: number;
  toS: number;
  speedMps: number;
  accelerationMps2: number;
  accelerationVariance: number;
}

/**
 * Cuts a coast-down into blocks of about `lengthS` and fits a straight line to all free-rolling speed channels of each
 * (engine speed is left out: the engine is off the wheels). Blocks with fewer than 4 samples are left out.
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
    const middle = (start + end) / 2;
    let s0 = 0;
    let s1 = 0;
    let s2 = 0;
    let r0 = 0;
    let r1 = 0;
    let used = 0;
    for (const source of SPEED_SOURCES) {
      const channel = signals[source];
      const reading = model.channels.get(source);
      if (!channel || !reading || source === "engineSpeed") continue;
      const weight = 1 / reading.deviationMps ** 2;
      const [a, b] = between(channel, start + reading.lagS, end + reading.lagS);
      for (let i = a; i < b; i++) {
        const t = channel.times[i] - reading.lagS - middle;
        const v = channel.values[i] / reading.scale;
        s0 += weight;
        s1 += weight * t;
        s2 += weight * t * t;
        r0 += weight * v;
        r1 += weight * t * v;
        used++;
      }
    }
    const spread = s2 - (s1 * s1) / s0;
    if (used < 4 || !(spread > 0)) continue;
    const slope = (r1 - (s1 * r0) / s0) / spread;
    blocks.push({
      fromS: start,
      toS: end,
      speedMps: (r0 - slope * s1) / s0,
      accelerationMps2: slope,
      accelerationVariance: 1 / spread,
    });
  }
  return blocks;
}
