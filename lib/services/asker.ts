import type { Queryable, Transaction } from "@/db/client";
import { selectMemberships } from "@/db/queries/people";
import type { Role } from "@/lib/policy/actor";
import { type Ctx, mintCtx } from "@/lib/services/ctx";
import { appendLedger, type LedgerEvent } from "@/lib/services/ledger/append";
import type { ObjectStore } from "@/storage/port";

/** A signed-in person outside any one workspace: who makes a workspace, joins one, or changes their own account. */
export interface Asker {
  userId: string;
  userName: string;
  db: Queryable;
  store: ObjectStore;
  requestId?: string;
}

/** The same person inside a workspace; the caller vouches for the membership. */
export function inWorkspace(
  asker: Asker,
  tx: Transaction,
  membership: { workspaceId: string; roles: Role[] },
): Ctx {
  return mintCtx({ ...asker, ...membership, db: tx });
}

/** Writes an entry into the ledger of each workspace that the person belongs to: what changes a person concerns them all. */
export async function appendToOwnLedgers(tx: Transaction, asker: Asker, event: LedgerEvent): Promise<void> {
  const memberships = await selectMemberships(tx, { userId: asker.userId });
  // One order for everybody, so that two such changes never wait for each other's lock.
  const inOrder = [...memberships].sort((a, b) => a.workspaceId.localeCompare(b.workspaceId));
  for (const membership of inOrder) await appendLedger(tx, inWorkspace(asker, tx, membership), event);
}
