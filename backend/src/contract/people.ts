import { z } from "zod";
import { MEMBER_ROLES, PERMISSIONS } from "./permissions.js";

export const PersonDto = z.object({ id: z.string(), name: z.string() }).meta({ id: "Person" });
export type PersonDto = z.infer<typeof PersonDto>;

/** GET /api/session: who asks. 401 without a session. */
export const SessionDto = z
  .object({
    person: PersonDto.extend({ email: z.string() }),
    workspace: z.object({ id: z.string(), name: z.string() }),
    role: z.enum(MEMBER_ROLES),
    permissions: z.array(z.enum(PERMISSIONS)),
  })
  .meta({ id: "Session" });
export type SessionDto = z.infer<typeof SessionDto>;

/** GET /api/welcome, open to all: what the sign-in page offers. */
export const WelcomeDto = z
  .object({
    /** Empty installation: POST /api/first-owner is open, once. */
    needsFirstOwner: z.boolean(),
    /** One-click sign-ins; empty unless the demo was seeded and the caller is on loopback. */
    demo: z.array(z.object({ role: z.enum(MEMBER_ROLES), name: z.string() })),
    version: z.string(),
  })
  .meta({ id: "Welcome" });
export type WelcomeDto = z.infer<typeof WelcomeDto>;

/** POST /api/demo-sign-in (204 and a session cookie). Passwords go to better-auth's own /api/auth/sign-in/email. */
export const DemoSignInBody = z.strictObject({ role: z.enum(MEMBER_ROLES) }).meta({ id: "DemoSignInBody" });

/** POST /api/first-owner (204 and a session cookie); 409 once anyone exists. */
export const FirstOwnerBody = z
  .strictObject({
    name: z.string().trim().min(1).max(120),
    email: z.email().max(254),
    password: z.string().min(10).max(128),
    workspace: z.string().trim().min(1).max(120),
  })
  .meta({ id: "FirstOwnerBody" });

/** GET /api/workspace/members */
export const MemberDto = PersonDto.extend({ role: z.enum(MEMBER_ROLES) }).meta({ id: "Member" });
export type MemberDto = z.infer<typeof MemberDto>;
