import { randomUUID } from "node:crypto";
import type { Queryable, Transaction } from "@/db/client";
import { ForbiddenError } from "@/lib/errors";
import type { Actor, Facts } from "@/lib/policy/actor";
import { can } from "@/lib/policy/can";
import type { Action } from "@/lib/policy/rules";
import type { ObjectStore } from "@/storage/port";

declare const minted: unique symbol;

/**
 * Who asks, in which workspace, and with what. Every verb takes it first; ids of the tenant come from here, never from input.
 * Made only by lib/auth (a session), the worker (the system) and tests.
 */
export interface Ctx extends Actor {
  readonly [minted]: true;
  readonly workspaceId: string;
  readonly userName: string;
  readonly requestId: string;
  readonly db: Queryable;
  readonly store: ObjectStore;
}

/** Makes a context; callers vouch that the membership was read from the database for this very request. */
export function mintCtx(parts: Omit<Ctx, typeof minted | "requestId"> & { requestId?: string }): Ctx {
  return { ...parts, requestId: parts.requestId ?? randomUUID() } as Ctx;
}

/** The same asker inside a transaction; a nested call is a savepoint. */
export async function withTransaction<T>(
  ctx: Ctx,
  work: (tx: Transaction, ctx: Ctx) => Promise<T>,
): Promise<T> {
  return await ctx.db.transaction((tx) => work(tx, { ...ctx, db: tx }));
}

/**
 * Asks the policy and refuses by exception.
 * @returns whether the act is the person's own release (one active lead only)
 * @throws ForbiddenError with the plain reason that the button shows too
 */
export function authorise(ctx: Ctx, action: Action, facts: Facts = {}): { selfReleased: boolean } {
  const verdict = can(ctx, action, facts);
  if (!verdict.ok) throw new ForbiddenError("not_allowed", verdict.reason, { action });
  return { selfReleased: verdict.selfReleased ?? false };
}
