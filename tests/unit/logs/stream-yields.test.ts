import { createReadStream, mkdtempSync, rmSync, statSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { expect, it } from "vitest";
import { readLogStream } from "@/lib/logs/read-log-stream";
import { writtenLog } from "@/tests/bench/written-log";

const MEGABYTES = 12;

it("a large log read from a file lets timers run in between", { timeout: 60_000 }, async () => {
  const folder = mkdtempSync(join(tmpdir(), "log-"));
  const file = join(folder, "log.csv");
  try {
    writeFileSync(file, Buffer.concat([...writtenLog(1e6 * MEGABYTES, { delimiter: ",", decimal: "." })]));
    let fired = 0;
    let reading = true;
    const tick = () => {
      if (!reading) return;
      fired++;
      setImmediate(tick);
    };
    setImmediate(tick);
    const table = await readLogStream(createReadStream(file), statSync(file).size);
    reading = false;
    expect(table.rowsRead).toBeGreaterThan(100_000);
    // The file comes in pieces of 64 KiB, about 180 of them; other work must get its turn between most.
    expect(fired).toBeGreaterThan((0.5 * 1e6 * MEGABYTES) / 65_536);
  } finally {
    rmSync(folder, { recursive: true });
  }
});
