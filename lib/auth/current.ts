import "server-only";
import type { Route } from "next";
import { headers } from "next/headers";
import { redirect } from "next/navigation";
import { cache } from "react";
import { selectMemberships, selectSession, selectUser } from "@/db/queries/people";
import { hashSessionToken } from "@/lib/auth/adapter";
import { auth } from "@/lib/auth/config";
import { ownPath } from "@/lib/auth/own-path";
import { readSessionToken, SESSION_LIFE_S } from "@/lib/auth/session-cookie";
import { UnauthorizedError } from "@/lib/errors";
import { requestIdOf } from "@/lib/http/request-id";
import type { Role } from "@/lib/policy/actor";
import { database, objectStore } from "@/lib/runtime";
import type { Asker } from "@/lib/services/asker";
import { type Ctx, mintCtx } from "@/lib/services/ctx";

export interface Person {
  id: string;
  /** The address where the person has written no name yet. */
  name: string;
  hasName: boolean;
  email: string;
  sessionAgeS: number;
  tokenHash: string;
  memberships: { workspaceId: string; workspaceName: string; sample: boolean; roles: Role[] }[];
  activeWorkspaceId: string | null;
}

/** The signed-in person with their memberships, read once a request; null without a session. */
export const currentPerson = cache(async (): Promise<Person | null> => {
  const session = await auth();
  const userId = session?.user?.id;
  const token = await readSessionToken();
  if (!userId || !token) return null;
  const db = database();
  const tokenHash = hashSessionToken(token);
  const [user, row, memberships] = await Promise.all([
    selectUser(db, { userId }),
    selectSession(db, { tokenHash }),
    selectMemberships(db, { userId }),
  ]);
  if (!user || !row || row.ageS > SESSION_LIFE_S) return null;
  const active = memberships.find((m) => m.workspaceId === row.activeWorkspaceId) ?? memberships[0];
  return {
    id: user.id,
    name: user.name ?? user.email,
    hasName: user.name !== null,
    email: user.email,
    sessionAgeS: row.ageS,
    tokenHash,
    memberships,
    activeWorkspaceId: active?.workspaceId ?? null,
  };
});

/** The context of this request in the person's active workspace, or null without session or membership. */
const currentCtx = cache(async (): Promise<Ctx | null> => {
  const person = await currentPerson();
  const membership = person?.memberships.find((m) => m.workspaceId === person.activeWorkspaceId);
  if (!person || !membership) return null;
  const requestId = requestIdOf(new Headers(await headers()));
  return mintCtx({
    userId: person.id,
    userName: person.name,
    workspaceId: membership.workspaceId,
    roles: membership.roles,
    requestId,
    db: database(),
    store: await objectStore(),
  });
});

/** The sign-in page, which leads back to the page that was asked for (its path comes from proxy.ts). */
async function signInPath(): Promise<Route> {
  const asked = ownPath((await headers()).get("x-path"));
  return `/sign-in?next=${encodeURIComponent(asked)}` as Route;
}

/** For pages: sends a stranger to sign in, and a person without a workspace to make one. */
export async function requireCtx(): Promise<Ctx> {
  const ctx = await currentCtx();
  if (ctx) return ctx;
  redirect((await currentPerson()) ? ("/workspaces/new" as Route) : await signInPath());
}

/** For pages that need no workspace. */
export async function requirePerson(): Promise<Person> {
  return (await currentPerson()) ?? redirect(await signInPath());
}

function noSession(): UnauthorizedError {
  return new UnauthorizedError(
    "no_session",
    "You are not signed in, or your session has ended. Sign in and try again.",
  );
}

/** For route handlers and actions. @throws UnauthorizedError */
export async function requireCtxOrThrow(): Promise<Ctx> {
  const ctx = await currentCtx();
  if (!ctx) throw noSession();
  return ctx;
}

/** For actions outside any one workspace. @throws UnauthorizedError */
export async function requireAskerOrThrow(): Promise<{ asker: Asker; person: Person }> {
  const person = await currentPerson();
  if (!person) throw noSession();
  const requestId = requestIdOf(new Headers(await headers()));
  const asker = {
    userId: person.id,
    userName: person.name,
    db: database(),
    store: await objectStore(),
    requestId,
  };
  return { asker, person };
}
