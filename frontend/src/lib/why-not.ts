import type { Permission, Role } from "@heddle/backend/contract";
import { may, PERMISSION_WORDS, rolesThat } from "@heddle/backend/contract";
import { eitherOf } from "./words";

/** Why a role may not do something, and who may; null where it may. */
export function whyNot(role: Role, permission: Permission): string | null {
  if (may(role, permission)) return null;
  const who = eitherOf(rolesThat(permission));
  return `As ${role} you cannot ${PERMISSION_WORDS[permission]}. An ${who} can.`.replace(
    /An (?![aeiou])/,
    "A ",
  );
}
