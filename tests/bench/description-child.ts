import { readDescription } from "@/lib/calibration/a2l/read-description";
import { peakMemoryBytes } from "@/tests/support/peak-memory";
import { writtenDescription } from "./written-description";

// Reads a description of so many MB once and prints how far memory grew beyond what holding its bytes takes.
const MIB = 1024 * 1024;
const { bytes } = writtenDescription(1e6 * Number(process.argv[2]));
const before = process.memoryUsage.rss();
const cpu = process.cpuUsage();
const { modules } = readDescription([{ name: "main.a2l", bytes }]);
const spent = process.cpuUsage(cpu);
const peak = peakMemoryBytes();
console.log(
  JSON.stringify({
    characteristics: modules[0].characteristics.size,
    cpuS: (spent.user + spent.system) / 1e6,
    beyondMib: (peak - before) / MIB,
  }),
);
