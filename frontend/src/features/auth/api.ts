import type { MemberRole, SessionDto } from "@heddle/backend/contract";
import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { $api, api, request, statusOf } from "../../lib/api";

const SESSION_KEY = ["get", "/api/session"] as const;

const fetchSession = async (signal?: AbortSignal): Promise<SessionDto> => {
  const { data } = await api.GET("/api/session", signal === undefined ? {} : { signal });
  if (data === undefined) throw new Error("The server told nothing about the session.");
  return data;
};

/**
 * The session, or null where nobody is signed in. A session that ends under an open page stays here as it was: the
 * app then offers to sign in again without leaving the page.
 */
export function useSessionQuery() {
  const queryClient = useQueryClient();
  return useQuery({
    queryKey: SESSION_KEY,
    queryFn: async ({ signal }) => {
      try {
        return await fetchSession(signal);
      } catch (error) {
        if (statusOf(error) === 401) return queryClient.getQueryData<SessionDto | null>(SESSION_KEY) ?? null;
        throw error;
      }
    },
    staleTime: 5 * 60_000,
  });
}

/** What the sign-in page offers. */
export const useWelcome = () => $api.useQuery("get", "/api/welcome", undefined, { staleTime: 0 });

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
      if ("demo" in by) await api.POST("/api/demo-sign-in", { body: { role: by.demo } });
      else if ("firstOwner" in by) await api.POST("/api/first-owner", { body: by.firstOwner });
      else await request("POST", "/api/auth/sign-in/email", { body: by.credentials });
      return fetchSession();
    },
    onSuccess: async (session) => {
      queryClient.setQueryData(SESSION_KEY, session);
      await queryClient.invalidateQueries({ predicate: (query) => query.queryKey[1] !== SESSION_KEY[1] });
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
