import "server-only";
import { selectSamplePeople } from "@/db/queries/people";
import { startSession } from "@/lib/auth/start-session";
import { env } from "@/lib/env";
import { NotFoundError } from "@/lib/errors";
import { logger } from "@/lib/logger";
import { database } from "@/lib/runtime";

/** The people of the demo, for the one-click buttons; none outside demo mode. */
export async function listSamplePeople() {
  return env().DEMO_MODE ? await selectSamplePeople(database()) : [];
}

/** Signs in as a person of the demo. @throws NotFoundError outside demo mode, and for anybody who is not of the demo */
export async function startSampleSession(userId: string): Promise<void> {
  const people = env().DEMO_MODE ? await selectSamplePeople(database(), { userId }) : [];
  if (people.length === 0) throw new NotFoundError("not_a_demo_person", "There is no such demo person.");
  await startSession(userId);
  logger().info({ event: "auth.demo", userId });
}
