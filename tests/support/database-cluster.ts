import type { TestProject } from "vitest/node";
import { migrateDatabase } from "@/db/migrate";
import { startThrowawayCluster } from "@/docker-less-setup/postgres.mjs";

/** What a test worker needs to reach the throw-away cluster. */
export type TestCluster = Readonly<{
  port: number;
  /** Passwords of the three roles; see ROLES of docker-less-setup/postgres.mjs. */
  passwords: Readonly<{ admin: string; owner: string; app: string }>;
}>;

declare module "vitest" {
  interface ProvidedContext {
    cluster: TestCluster;
  }
}

/**
 * Starts a PostgreSQL server in a temporary folder (fsync off) and migrates the template of all test databases.
 * Ends with the test run, also when that is killed.
 */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const cluster = await startThrowawayCluster();
  try {
    await migrateDatabase(cluster.url("owner"));
  } catch (error) {
    await cluster.stop();
    throw error;
  }
  project.provide("cluster", { port: cluster.port, passwords: cluster.passwords });
  return () => cluster.stop();
}
