import { startWorker } from "@/lib/jobs/start-worker";
import type { ObjectStore } from "@/storage/port";
import { IDLE_HANDLERS } from "@/tests/support/idle-handlers";

// A worker in a process of its own that takes a job, says so, and never finishes it: to be killed by a test.
const stuck = {
  run: async () => {
    process.stdout.write("taken\n");
    await new Promise(() => setInterval(() => undefined, 1_000));
  },
};

await startWorker({
  databaseUrl: process.argv[2] ?? "",
  store: {} as ObjectStore,
  handlers: { ...IDLE_HANDLERS, "judge-run": stuck, "compute-comparison": stuck },
  sendMail: null,
  sweep: null,
});
process.stdout.write("ready\n");
