import { readFileSync } from "node:fs";

/** Greatest resident memory of this process so far, bytes. What getrusage tells begins at that of the process that started it. */
export function peakMemoryBytes(): number {
  const found = /^VmHWM:\s+(\d+) kB$/m.exec(readFileSync("/proc/self/status", "utf8"));
  if (!found) throw new Error("this system does not tell a process's peak memory");
  return Number(found[1]) * 1024;
}
