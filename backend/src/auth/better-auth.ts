/** better-auth as Heddle uses it: e-mail and password, sessions in the tables, nothing that sends or calls out. */
import { randomUUID } from "node:crypto";
import { betterAuth, type BetterAuthPlugin } from "better-auth";
import { drizzleAdapter } from "better-auth/adapters/drizzle";
import { createAuthEndpoint } from "better-auth/api";
import { setSessionCookie } from "better-auth/cookies";
import { z } from "zod";
import type { Config } from "../config/config.js";
import type { Database } from "../database/database.js";
import { accounts, people, rateLimits, sessions, verifications } from "../database/schema/index.js";
import { withHashedTokens } from "./hashed-tokens.js";

/** Request header in which the server itself puts the caller's address; a client's own is dropped. */
export const ADDRESS_HEADER = "x-heddle-address";

export const PASSWORD_LENGTH = { min: 10, max: 128 } as const;
/** Sign-ins by password from one address, wrong or right. */
export const SIGN_IN_LIMIT = { attempts: 10, seconds: 60 } as const;
const DAY_S = 24 * 60 * 60;

/** Lets the server open a session for a person it has already identified; no route leads here. */
const opensSessions = {
  id: "opens-sessions",
  endpoints: {
    openSession: createAuthEndpoint(
      "/open-session",
      { method: "POST", body: z.object({ personId: z.string() }), metadata: { SERVER_ONLY: true } },
      async (ctx) => {
        const user = await ctx.context.internalAdapter.findUserById(ctx.body.personId);
        if (user === null) throw new Error("A session was to be opened for a person that does not exist.");
        const session = await ctx.context.internalAdapter.createSession(user.id);
        await setSessionCookie(ctx, { session, user });
        return { personId: user.id };
      },
    ),
  },
} satisfies BetterAuthPlugin;

export function makeBetterAuth(config: Config, db: Database, secret: string) {
  const tables = {
    user: people,
    session: sessions,
    account: accounts,
    verification: verifications,
    rateLimit: rateLimits,
  };
  return betterAuth({
    appName: "Heddle",
    secret,
    baseURL: config.appUrl ?? `http://localhost:${config.port}`,
    basePath: "/api/auth",
    trustedOrigins: config.appUrl === null ? [] : [config.appUrl],
    database: withHashedTokens(drizzleAdapter(db, { provider: "pg", schema: tables })),
    emailAndPassword: {
      enabled: true,
      // People come by the first-owner page, the demo or an invitation.
      disableSignUp: true,
      minPasswordLength: PASSWORD_LENGTH.min,
      maxPasswordLength: PASSWORD_LENGTH.max,
    },
    session: { expiresIn: 7 * DAY_S, updateAge: DAY_S },
    rateLimit: {
      enabled: true,
      storage: "database",
      window: 60,
      max: 300,
      customRules: { "/sign-in/email": { window: SIGN_IN_LIMIT.seconds, max: SIGN_IN_LIMIT.attempts } },
    },
    advanced: {
      cookiePrefix: "heddle",
      useSecureCookies: config.appUrl?.startsWith("https:") ?? false,
      database: { generateId: () => randomUUID() },
      ipAddress: { ipAddressHeaders: [ADDRESS_HEADER] },
      // The server's own origin check stands before every route, these included.
      disableCSRFCheck: true,
    },
    telemetry: { enabled: false },
    logger: { level: "error" },
    plugins: [opensSessions],
  });
}

export type BetterAuth = ReturnType<typeof makeBetterAuth>;
/** Injection token of {@link BetterAuth}. */
export const BETTER_AUTH = Symbol("better-auth");
