import { randomBytes } from "node:crypto";
import { openStore, type StoreConfig } from "@/storage/open";
import { MIB, uploadBytes } from "@/tests/support/store-bytes";

/** A child process that uploads without end until it is killed. Prints each upload that it was told is stored. */
const config = JSON.parse(process.argv[2] ?? "") as StoreConfig;
const store = await openStore(config);
process.stdout.write("begun\n");
for (;;) {
  const bytes = randomBytes(20 * MIB + 5);
  const { sha256, sizeBytes } = await uploadBytes(store, "killed", bytes);
  process.stdout.write(`stored ${sha256} ${sizeBytes}\n`);
}
