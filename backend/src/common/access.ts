/** What a route asks of its caller. Every route declares one of the two; the guard refuses a route with neither. */
import { applyDecorators, SetMetadata } from "@nestjs/common";
import { ApiForbiddenResponse, ApiUnauthorizedResponse } from "@nestjs/swagger";
import { ErrorDto } from "../contract/errors.js";
import type { Permission } from "../contract/permissions.js";

export const ACCESS = "heddle:access";
/** `open`: anyone; `member`: any signed-in member; else a permission of the roles table. */
export type Access = "open" | "member" | Permission;

/** The route is for anyone, signed in or not. */
export const Open = (): MethodDecorator & ClassDecorator => SetMetadata<string, Access>(ACCESS, "open");

/** The route is for members whose role has the permission; without one, for every member. */
export const Needs = (permission?: Permission): MethodDecorator & ClassDecorator =>
  applyDecorators(
    SetMetadata<string, Access>(ACCESS, permission ?? "member"),
    ApiUnauthorizedResponse({ description: "Not signed in", standardSchema: ErrorDto }),
    ApiForbiddenResponse({ description: "Not allowed to this role", standardSchema: ErrorDto }),
  );
