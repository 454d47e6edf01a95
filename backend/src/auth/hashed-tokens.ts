/**
 * better-auth keeps session tokens as they are. This lies between it and its adapter and keeps their SHA-256
 * alone, so that a copy of the tables signs nobody in. Tokens are random, 190 bits: a plain hash suffices.
 */
import { createHash } from "node:crypto";
import type { BetterAuthOptions, DBAdapter, DBTransactionAdapter, Where } from "better-auth";

type Adapter = DBAdapter;
type TransactionAdapter = DBTransactionAdapter;

const hash = (token: string): string => createHash("sha256").update(token).digest("hex");

/** The conditions with tokens hashed, and the way back from each hash to its token. */
function hashWhere(where: Where[]): { where: Where[]; tokenByHash: Map<string, string> } {
  const tokenByHash = new Map<string, string>();
  const hashed = (token: string): string => {
    const key = hash(token);
    tokenByHash.set(key, token);
    return key;
  };
  const rewritten = where.map((clause): Where => {
    if (clause.field !== "token") return clause;
    if (typeof clause.value === "string") return { ...clause, value: hashed(clause.value) };
    if (Array.isArray(clause.value))
      return { ...clause, value: clause.value.map((value) => hashed(String(value))) };
    return clause;
  });
  return { where: rewritten, tokenByHash };
}

const hasToken = (row: unknown): row is { token: string } =>
  typeof row === "object" && row !== null && "token" in row && typeof row.token === "string";

function restore<Row>(row: Row, tokenByHash: ReadonlyMap<string, string>): Row {
  if (!hasToken(row)) return row;
  const token = tokenByHash.get(row.token);
  return token === undefined ? row : { ...row, token };
}

function wrapRows(inner: TransactionAdapter): TransactionAdapter {
  const forSession = <Query extends { model: string; where?: Where[] | undefined }>(query: Query) => {
    if (query.model !== "session" || query.where === undefined)
      return { query, tokenByHash: new Map<string, string>() };
    const { where, tokenByHash } = hashWhere(query.where);
    return { query: { ...query, where }, tokenByHash };
  };
  return {
    ...inner,
    create: async (query) => {
      if (query.model !== "session" || !hasToken(query.data)) return inner.create(query);
      const { token } = query.data;
      const row = await inner.create({ ...query, data: { ...query.data, token: hash(token) } });
      return restore(row, new Map([[hash(token), token]])) as Awaited<
        ReturnType<typeof inner.create>
      > as never;
    },
    findOne: async (query) => {
      const s = forSession(query);
      return restore(await inner.findOne(s.query), s.tokenByHash);
    },
    findMany: async (query) => {
      const s = forSession(query);
      return (await inner.findMany(s.query)).map((row) => restore(row, s.tokenByHash)) as never;
    },
    update: async (query) => {
      const s = forSession(query);
      return restore(await inner.update(s.query), s.tokenByHash);
    },
    consumeOne: async (query) => {
      const s = forSession(query);
      return restore(await inner.consumeOne(s.query), s.tokenByHash);
    },
    count: (query) => inner.count(forSession(query).query),
    updateMany: (query) => inner.updateMany(forSession(query).query),
    delete: (query) => inner.delete(forSession(query).query),
    deleteMany: (query) => inner.deleteMany(forSession(query).query),
  };
}

/** An adapter whose `session` rows carry the hash of their token. */
export const withHashedTokens =
  (factory: (options: BetterAuthOptions) => Adapter) =>
  (options: BetterAuthOptions): Adapter => {
    const inner = factory(options);
    return {
      ...inner,
      ...wrapRows(inner),
      transaction: (run) => inner.transaction((inside) => run(wrapRows(inside))),
    };
  };
