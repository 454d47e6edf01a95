import { statusOf } from "../lib/api";
import { Refusal } from "./refusal";

interface QueryProblemProps {
  query: { error: unknown; refetch: () => Promise<unknown> };
}

/**
 * What kept a part of the page from being asked (again), with a way to retry; nothing while all is well. An ended
 * session is left to the dialog that lets one sign in again: the page stays as it is.
 */
export function QueryProblem({ query }: QueryProblemProps) {
  if (query.error === null || statusOf(query.error) === 401) return null;
  return (
    <div style={{ marginBottom: 14 }}>
      <Refusal error={query.error} onRetry={() => void query.refetch()} />
    </div>
  );
}

/** Nothing came and nothing will: only the problem is shown. */
export const hasNothing = (query: { data: unknown; isError: boolean }): boolean =>
  query.data === undefined && query.isError;
