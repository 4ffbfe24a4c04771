import { demandNode } from "./node-version.mjs";

demandNode();
// Loaded only now: an old Node.js would stop at its imports without a plain sentence.
const { serve } = await import("./serve.mjs");
await serve();
