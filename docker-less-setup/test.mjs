import { demandNode } from "./node-version.mjs";

demandNode();
// Loaded only now: an old Node.js would stop at its imports without a plain sentence.
const { runTests } = await import("./run-tests.mjs");
await runTests(process.argv.slice(2));
