import { lines as campaign } from "./campaign";
import { lines as coverage } from "./coverage";
import { lines as descriptions, printDescriptionMemory } from "./descriptions";
import { printHeatScroll } from "./heat-scroll";
import { lines as images } from "./images";
import { lines as ingest } from "./ingest";
import { printMemory } from "./ingest-memory";
import { printLine } from "./line";
import { lines as logs } from "./logs";
import { lines as mdf } from "./mdf";
import { lines as numerics } from "./numerics";
import { python } from "./python";

// npm run bench: ratios taken in one run on one machine, CPU time, the middle of rounds that take turns with the reference.
// A budget that is not kept is said and ends with code 1; what is not installed is "not run". No test depends on the figures.
console.log(`Node ${process.versions.node}; ${python ? python.versions : "no python3 with scipy"}`);
const kept = [
  ...numerics,
  ...campaign,
  ...logs,
  ...ingest,
  ...mdf,
  ...images,
  ...coverage,
  ...descriptions,
].map(printLine);
kept.push(printMemory(), printDescriptionMemory(), await printHeatScroll());
if (kept.includes(false)) process.exitCode = 1;
