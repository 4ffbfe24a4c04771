import type { OrderCard } from "@/lib/compare/plan/order-card";

/** What a workshop knows of its own strip and bench. */
export interface DriveFigures {
  /** Way of one leg, run-up and braking room included, m. */
  stripM: number;
  /** One leg with turning round, min. */
  minutesPerLeg: number;
  /** Writing the image and proving it, min. */
  minutesPerWrite: number;
  /** Over the strip, full load and coasting together. */
  litresPer100Km: number;
}

/** Where nothing is known yet [common practice, no source]. */
export const USUAL_DRIVE: DriveFigures = {
  stripM: 2000,
  minutesPerLeg: 3,
  minutesPerWrite: 8,
  litresPer100Km: 35,
};

/** What an order card costs. */
export interface CardCost {
  runs: number;
  writes: number;
  settlingDrives: number;
  minutes: number;
  fuelL: number;
  metres: number;
}

/** Metres over the strip: a settling drive goes out and back, so that the twin after it starts at the right end. */
export function cardMetres(
  { runs, settlingDrives }: Pick<OrderCard, "runs" | "settlingDrives">,
  stripM: number,
): number {
  return (runs + 2 * settlingDrives) * stripM;
}

/** Counts writes, settling drives, minutes, fuel and metres of a card; the way to the strip is not in it. */
export function cardCost(card: OrderCard, figures: DriveFigures): CardCost {
  const { runs, writes, settlingDrives } = card;
  const metres = cardMetres(card, figures.stripM);
  return {
    ...{ runs, writes, settlingDrives, metres },
    minutes: (runs + 2 * settlingDrives) * figures.minutesPerLeg + writes * figures.minutesPerWrite,
    fuelL: (metres / 100_000) * figures.litresPer100Km,
  };
}
