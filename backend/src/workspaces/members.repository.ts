import { Inject, Injectable } from "@nestjs/common";
import { and, asc, eq } from "drizzle-orm";
import type { Actor } from "../common/actor.js";
import type { MemberDto } from "../contract/people.js";
import type { MemberRole } from "../contract/permissions.js";
import { DATABASE, type Database } from "../database/database.js";
import { firstRow } from "../database/rows.js";
import { members, people, workspaces } from "../database/schema/index.js";

@Injectable()
export class MembersRepository {
  constructor(@Inject(DATABASE) private readonly db: Database) {}

  /** The workspace that a person joined first, and their role there. */
  async firstOf(personId: string): Promise<Pick<Actor, "workspace" | "role"> | null> {
    const rows = await this.db
      .select({ id: workspaces.id, name: workspaces.name, role: members.role })
      .from(members)
      .innerJoin(workspaces, eq(workspaces.id, members.workspaceId))
      .where(eq(members.personId, personId))
      .orderBy(asc(members.joinedAt), asc(workspaces.id))
      .limit(1);
    const row = firstRow(rows);
    return row === undefined ? null : { workspace: { id: row.id, name: row.name }, role: row.role };
  }

  async list(workspaceId: string): Promise<MemberDto[]> {
    return await this.db
      .select({ id: people.id, name: people.name, role: members.role })
      .from(members)
      .innerJoin(people, eq(people.id, members.personId))
      .where(eq(members.workspaceId, workspaceId))
      .orderBy(asc(people.name), asc(people.id));
  }

  /** The demo workspaces' people, one per role. */
  async demoPeople(): Promise<{ id: string; name: string; role: MemberRole }[]> {
    return await this.db
      .select({ id: people.id, name: people.name, role: members.role })
      .from(members)
      .innerJoin(workspaces, and(eq(workspaces.id, members.workspaceId), eq(workspaces.demo, true)))
      .innerJoin(people, eq(people.id, members.personId))
      .orderBy(asc(members.joinedAt), asc(people.name));
  }
}
