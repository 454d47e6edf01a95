import { createParamDecorator, type ExecutionContext } from "@nestjs/common";
import type { Request } from "express";
import type { MemberRole, Permission } from "../contract/permissions.js";
import { may } from "../contract/permissions.js";
import { notAllowed, notSignedIn } from "./refusal.js";

/** The person who asks, the workspace they work in and their role there. */
export interface Actor {
  person: { id: string; name: string; email: string };
  workspace: { id: string; name: string };
  role: MemberRole;
}

const actors = new WeakMap<Request, Actor>();

/** Remembers who sent a request; the access guard alone calls it. */
export const rememberActor = (request: Request, actor: Actor): void => {
  actors.set(request, actor);
};

/** Handler parameter: the signed-in {@link Actor}. */
export const CurrentActor = createParamDecorator((_: unknown, context: ExecutionContext): Actor => {
  const actor = actors.get(context.switchToHttp().getRequest<Request>());
  if (actor === undefined) throw notSignedIn();
  return actor;
});

/** @throws Refusal "not-allowed" naming the roles that may */
export function requirePermission(actor: Actor, permission: Permission): void {
  if (!may(actor.role, permission)) throw notAllowed(permission);
}
