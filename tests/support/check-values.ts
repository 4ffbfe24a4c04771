import { readFileSync } from "node:fs";
import { gunzipSync } from "node:zlib";

/** One published or independently computed check value; `source` says where it comes from. */
export interface CheckValue {
  id: string;
  topic: string;
  formula: string;
  // biome-ignore lint/suspicious/noExplicitAny: each record has its own shape, stated in the file
  inputs: any;
  // biome-ignore lint/suspicious/noExplicitAny: each record has its own shape, stated in the file
  expected: any;
  // biome-ignore lint/suspicious/noExplicitAny: each record has its own shape, stated in the file
  tolerance: any;
  source: string;
}

const all = JSON.parse(
  gunzipSync(readFileSync(new URL("../golden/check-values.json.gz", import.meta.url))).toString("utf8"),
) as CheckValue[];

/** The check value of that id; throws when the file has none. */
export function checkValue(id: string): CheckValue {
  const found = all.find((value) => value.id === id);
  if (!found) throw new Error(`No check value ${id}`);
  return found;
}

/** Every check value whose id starts with `prefix`, at least one. */
export function checkValues(prefix: string): CheckValue[] {
  const found = all.filter((value) => value.id.startsWith(prefix));
  if (found.length === 0) throw new Error(`No check value starts with ${prefix}`);
  return found;
}
