import "server-only";
import { randomBytes } from "node:crypto";
import NextAuth, { type NextAuthConfig } from "next-auth";
import Nodemailer from "next-auth/providers/nodemailer";
import { createAdapter } from "@/lib/auth/adapter";
import { sessionCookieName, sessionCookieOptions } from "@/lib/auth/session-cookie";
import { queueSignInMail } from "@/lib/auth/sign-in-mail";
import { env } from "@/lib/env";
import { logger } from "@/lib/logger";
import { database } from "@/lib/runtime";

/** A link works ten minutes (OWASP ASVS 5.0, 6.5.5) and once. */
const LINK_LIFE_S = 10 * 60;
/** A session ends after twelve idle hours; every use within an hour of the last renewal leaves the row alone. */
export const SESSION_IDLE_S = 12 * 60 * 60;
const SESSION_RENEW_S = 60 * 60;

export const EMAIL_PROVIDER = "email";

/** Settings of the sign-in library; a function, so that a build needs no environment. */
export function authConfig(): NextAuthConfig {
  const settings = env();
  return {
    adapter: createAdapter(database()),
    secret: settings.AUTH_SECRET,
    trustHost: true,
    basePath: "/api/auth",
    session: {
      strategy: "database",
      maxAge: SESSION_IDLE_S,
      updateAge: SESSION_RENEW_S,
      generateSessionToken: () => randomBytes(32).toString("base64url"),
    },
    cookies: { sessionToken: { name: sessionCookieName(), options: sessionCookieOptions() } },
    // The library prints addresses and causes to the console; only the kind of a failure is worth a line.
    logger: {
      error: (error) => logger().warn({ event: "auth.library", kind: error.name }),
      warn: () => undefined,
      debug: () => undefined,
    },
    pages: { signIn: "/sign-in", verifyRequest: "/sign-in/sent", error: "/sign-in" },
    providers: [
      Nodemailer({
        id: EMAIL_PROVIDER,
        // Required by the provider; sending is ours: the mail goes through the queue like every other.
        server: {},
        from: settings.MAIL_FROM,
        maxAge: LINK_LIFE_S,
        generateVerificationToken: () => randomBytes(32).toString("base64url"),
        sendVerificationRequest: ({ identifier, token }) => queueSignInMail(identifier, token),
      }),
    ],
    callbacks: {
      session: ({ session, user }) => ({ ...session, user: { ...session.user, id: user.id } }),
    },
  };
}

export const { auth, signIn, signOut } = NextAuth(() => authConfig());
