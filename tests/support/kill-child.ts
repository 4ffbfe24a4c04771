import { createDatabase } from "@/db/client";
import type { Role } from "@/lib/policy/actor";
import { mintCtx } from "@/lib/services/ctx";
import { addRevision } from "@/lib/services/revisions/create";
import type { CreateRevision } from "@/lib/services/revisions/schema";
import { filesystemStore } from "@/storage/filesystem";
import type { ObjectStore } from "@/storage/port";

/** What the parent process hands over as JSON. */
export interface KillOrder {
  databaseUrl: string;
  storeRoot: string;
  workspaceId: string;
  userId: string;
  roles: Role[];
  request: CreateRevision;
  idempotencyKey: string;
  /** The process ends itself by SIGKILL right before its n-th call of database or store, first = 1; 0 = never. */
  killAtCall: number;
}

let calls = 0;
function count(order: KillOrder): void {
  calls += 1;
  if (calls === order.killAtCall) process.kill(process.pid, "SIGKILL");
}

function countingStore(order: KillOrder): ObjectStore {
  const linkSecret = "only-for-tests-only-for-tests-only";
  const store = filesystemStore({
    driver: "filesystem",
    root: order.storeRoot,
    linkSecret,
    linkPath: "/api/files",
  });
  return new Proxy(store, {
    get(target, name) {
      const member = Reflect.get(target, name) as unknown;
      if (typeof member !== "function") return member;
      return (...args: unknown[]) => {
        count(order);
        return member.apply(target, args) as unknown;
      };
    },
  });
}

const order = JSON.parse(process.argv[2]) as KillOrder;
const { db, pool, close } = createDatabase(order.databaseUrl, 2);
pool.on("connect", (client) => {
  const query = client.query.bind(client) as (...args: unknown[]) => unknown;
  client.query = ((...args: unknown[]) => {
    count(order);
    return query(...args);
  }) as typeof client.query;
});
const ctx = mintCtx({
  userId: order.userId,
  userName: "A calibrator",
  workspaceId: order.workspaceId,
  roles: order.roles,
  db,
  store: countingStore(order),
});
const answer = await addRevision(ctx, order.request, order.idempotencyKey);
process.stdout.write(JSON.stringify({ answer, calls }));
await close();
