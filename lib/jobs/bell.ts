/** Something to sleep on: a ring during work is not lost, it ends the next wait at once. */
export interface Bell {
  ring(): void;
  /** Resolves at the next ring, or at one since the last wait, or after `atMostMs`. */
  wait(atMostMs: number): Promise<void>;
}

export function createBell(): Bell {
  let rung = false;
  let wake: (() => void) | undefined;
  return {
    ring() {
      rung = true;
      wake?.();
    },
    async wait(atMostMs) {
      if (!rung) {
        await new Promise<void>((resolve) => {
          const timer = setTimeout(resolve, atMostMs);
          wake = () => {
            clearTimeout(timer);
            resolve();
          };
        });
      }
      wake = undefined;
      rung = false;
    },
  };
}
