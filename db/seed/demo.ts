import { createDatabase } from "@/db/client";
import { seedPeople } from "@/db/seed/demo-people";
import { tellStory } from "@/db/seed/demo-story";
import { workspaces } from "@/db/tables";
import { env } from "@/lib/env";
import { objectStore } from "@/lib/runtime";

// Makes the sample workspace in an empty database; run once by the first start in demo mode.
const { db, close } = createDatabase(env().DATABASE_URL, 4);
try {
  const [known] = await db.select({ id: workspaces.id }).from(workspaces).limit(1);
  if (known) {
    console.log("There is a workspace already; the demo is left as it is.");
  } else {
    await tellStory(await seedPeople(db, await objectStore()));
    console.log("The demo workspace is ready.");
  }
} finally {
  await close();
}
