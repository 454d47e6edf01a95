import { randomUUID } from "node:crypto";
import { Inject, Injectable } from "@nestjs/common";
import { and, eq } from "drizzle-orm";
import type { z } from "zod";
import type { FirstOwnerBody } from "../contract/people.js";
import { isDuplicate } from "../common/failures.js";
import { Refusal } from "../common/refusal.js";
import { DATABASE, type Database } from "../database/database.js";
import { firstRow } from "../database/rows.js";
import { installation, members, workspaces } from "../database/schema/index.js";
import { addPerson } from "./people.js";

const takenAlready = (): Refusal =>
  new Refusal(
    "wrong-state",
    "This installation already has its first owner: sign in, or ask them to invite you.",
  );

/** The first person of an installation, who owns its workspace. The demo's invented people do not count. */
@Injectable()
export class FirstOwnerService {
  constructor(@Inject(DATABASE) private readonly db: Database) {}

  async isNeeded(): Promise<boolean> {
    return (
      firstRow(await this.db.select({ made: installation.firstOwnerMade }).from(installation))?.made !== true
    );
  }

  /**
   * Makes person, workspace and membership in one transaction, once in the life of an installation.
   * @returns the person's id
   * @throws Refusal "wrong-state" once there is a first owner, "bad-request" for an e-mail address in use
   */
  async make(body: z.output<typeof FirstOwnerBody>): Promise<string> {
    try {
      return await this.db.transaction(async (tx) => {
        await tx.insert(installation).values({ id: 1 }).onConflictDoNothing();
        const claimed = await tx
          .update(installation)
          .set({ firstOwnerMade: true })
          .where(and(eq(installation.id, 1), eq(installation.firstOwnerMade, false)))
          .returning({ id: installation.id });
        if (claimed.length === 0) throw takenAlready();
        const personId = await addPerson(tx, body);
        const workspaceId = randomUUID();
        await tx.insert(workspaces).values({ id: workspaceId, name: body.workspace });
        await tx.insert(members).values({ workspaceId, personId, role: "owner" });
        return personId;
      });
    } catch (error) {
      if (isDuplicate(error)) throw new Refusal("bad-request", "Somebody already has this e-mail address.");
      throw error;
    }
  }
}
