import { Injectable, type CanActivate, type ExecutionContext } from "@nestjs/common";
import { Reflector } from "@nestjs/core";
import type { Request } from "express";
import { AuthService } from "../auth/auth.service.js";
import { ACCESS, type Access } from "./access.js";
import { rememberActor, requirePermission } from "./actor.js";
import { notSignedIn } from "./refusal.js";

/** The one guard of every HTTP route: a session, a membership and the permission that the route declares. */
@Injectable()
export class AccessGuard implements CanActivate {
  constructor(
    private readonly reflector: Reflector,
    private readonly auth: AuthService,
  ) {}

  async canActivate(context: ExecutionContext): Promise<boolean> {
    // The socket gateway authenticates at its handshake and asks `requirePermission` at each event.
    if (context.getType() !== "http") return true;
    const access = this.reflector.getAllAndOverride<Access | undefined>(ACCESS, [
      context.getHandler(),
      context.getClass(),
    ]);
    if (access === "open") return true;
    if (access === undefined)
      throw new Error(`${context.getClass().name} has a route that declares no access.`);
    const request = context.switchToHttp().getRequest<Request>();
    const actor = await this.auth.actorOf(request.headers);
    if (actor === null) throw notSignedIn();
    if (access !== "member") requirePermission(actor, access);
    rememberActor(request, actor);
    return true;
  }
}
