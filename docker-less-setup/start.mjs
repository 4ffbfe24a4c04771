import { demandNode } from "./node-version.mjs";

demandNode();
// Loaded only now, and without newer syntax: an old Node.js would stop here without a plain sentence.
import("./serve.mjs").then(({ serve }) => serve());
