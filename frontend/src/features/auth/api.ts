import type { MemberRole } from "@heddle/backend/contract";
import { SessionDto, WelcomeDto } from "@heddle/backend/contract";
import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { ApiError, request } from "../../lib/api";

const SESSION_KEY = ["session"] as const;

/** The session, or null where nobody is signed in. */
export const useSessionQuery = () =>
  useQuery({
    queryKey: SESSION_KEY,
    queryFn: async ({ signal }) => {
      try {
        return await request("GET", "/api/session", { answer: SessionDto, signal });
      } catch (error) {
        if (error instanceof ApiError && error.status === 401) return null;
        throw error;
      }
    },
    staleTime: 5 * 60_000,
  });

/** What the sign-in page offers. */
export const useWelcome = () =>
  useQuery({
    queryKey: ["welcome"],
    queryFn: ({ signal }) => request("GET", "/api/welcome", { answer: WelcomeDto, signal }),
    staleTime: 0,
  });

export interface Credentials {
  email: string;
  password: string;
}
export interface FirstOwner extends Credentials {
  name: string;
  workspace: string;
}

/** All ways in; each ends with a session cookie, after which everything asked before is asked anew. */
export function useSignIn() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: async (
      by: { demo: MemberRole } | { credentials: Credentials } | { firstOwner: FirstOwner },
    ) => {
      if ("demo" in by) await request("POST", "/api/demo-sign-in", { body: { role: by.demo } });
      else if ("firstOwner" in by) await request("POST", "/api/first-owner", { body: by.firstOwner });
      else await request("POST", "/api/auth/sign-in/email", { body: by.credentials });
      return request("GET", "/api/session", { answer: SessionDto });
    },
    onSuccess: async (session) => {
      queryClient.setQueryData(SESSION_KEY, session);
      await queryClient.invalidateQueries({ predicate: (query) => query.queryKey[0] !== SESSION_KEY[0] });
    },
  });
}

export function useSignOut() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: () => request("POST", "/api/auth/sign-out", { body: {} }),
    onSuccess: () => {
      queryClient.clear();
    },
  });
}
