import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { filesystemStore } from "@/storage/filesystem";
import type { ObjectStore } from "@/storage/port";

/** A filesystem store in a temporary folder of a test's own. */
export function createTestStore(): { store: ObjectStore; root: string; drop: () => void } {
  const root = mkdtempSync(join(tmpdir(), "twinpass-store-"));
  const linkSecret = "only-for-tests-only-for-tests-only";
  const store = filesystemStore({ driver: "filesystem", root, linkSecret, linkPath: "/api/files" });
  return { store, root, drop: () => rmSync(root, { recursive: true, force: true }) };
}
