import { randomUUID } from "node:crypto";
import { hashPassword } from "better-auth/crypto";
import type { Database } from "../database/database.js";
import { accounts, people } from "../database/schema/index.js";

/**
 * Adds a person who signs in by e-mail and password, as better-auth's own sign-up would.
 * @param db best an open transaction
 * @returns the new person's id
 */
export async function addPerson(
  db: Database,
  person: { name: string; email: string; password: string },
): Promise<string> {
  const id = randomUUID();
  await db.insert(people).values({ id, name: person.name, email: person.email.toLowerCase() });
  const password = await hashPassword(person.password);
  await db
    .insert(accounts)
    .values({ id: randomUUID(), userId: id, accountId: id, providerId: "credential", password });
  return id;
}
