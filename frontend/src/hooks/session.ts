import type { Permission, SessionDto } from "@heddle/backend/contract";
import { may } from "@heddle/backend/contract";
import { createContext, useContext } from "react";

/** Given by the app to every page behind the sign-in. */
export const SessionContext = createContext<SessionDto | null>(null);

/** Who is signed in, in which workspace and role. Only for pages behind the sign-in. */
export function useSession(): SessionDto {
  const session = useContext(SessionContext);
  if (session === null) throw new Error("useSession is for pages behind the sign-in.");
  return session;
}

/** Whether the signed-in person's role allows something, by the one table of the contract. */
export const useMay = (permission: Permission): boolean => may(useSession().role, permission);
