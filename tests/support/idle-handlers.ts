import type { Handlers } from "@/lib/jobs/start-worker";

const idle = { run: async () => undefined };

/** Handlers of queues that a test of the worker has nothing to do with. */
export const IDLE_HANDLERS: Pick<
  Handlers,
  "read-description" | "read-image" | "compute-change-set" | "compute-coverage"
> = {
  "read-description": idle,
  "read-image": idle,
  "compute-change-set": idle,
  "compute-coverage": idle,
};
