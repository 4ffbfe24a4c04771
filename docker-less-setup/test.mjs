import { demandNode } from "./node-version.mjs";

demandNode();
// Loaded only now, and without newer syntax: an old Node.js would stop here without a plain sentence.
import("./run-tests.mjs").then(({ runTests }) => runTests(process.argv.slice(2)));
