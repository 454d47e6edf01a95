import { randomBytes } from "node:crypto";
import { Inject, Injectable, type OnApplicationBootstrap } from "@nestjs/common";
import { eq } from "drizzle-orm";
import { addPerson } from "../auth/people.js";
import { isLoopback } from "../common/loopback.js";
import { CONFIG, type Config } from "../config/config.js";
import { MEMBER_ROLES, type MemberRole } from "../contract/permissions.js";
import type { ExampleDto } from "../contract/scenes.js";
import { DATABASE, type Database } from "../database/database.js";
import { writtenRow } from "../database/rows.js";
import { installation, members, people, workspaces } from "../database/schema/index.js";
import { ExamplesService } from "../examples/examples.service.js";
import { judgeMedium } from "../media/judge.js";
import { MediaRepository } from "../media/media.repository.js";
import { ActivityRepository } from "../projects/activity.repository.js";
import { ProjectsRepository } from "../projects/projects.repository.js";
import { judgeImport } from "../scenes/judge.js";
import { ScenesRepository } from "../scenes/scenes.repository.js";
import { DEMO_MEDIA } from "./demo-media.js";
import { DEMO_PROJECTS } from "./demo-projects.js";

const WORKSPACE = "Saltmarsh relay mast";

/**
 * Fills an empty installation at its first start with a workspace to look around in. Nobody is told the people's
 * passwords: one signs in as them by a click, at the same machine alone. Where the server is open to a network at
 * its first start, nothing is seeded.
 */
@Injectable()
export class DemoSeeder implements OnApplicationBootstrap {
  constructor(
    @Inject(CONFIG) private readonly config: Config,
    @Inject(DATABASE) private readonly db: Database,
    private readonly examples: ExamplesService,
    private readonly projects: ProjectsRepository,
    private readonly scenes: ScenesRepository,
    private readonly media: MediaRepository,
    private readonly activities: ActivityRepository,
  ) {}

  async onApplicationBootstrap(): Promise<void> {
    const examples = await this.examples.list();
    await this.db.transaction(async (tx) => {
      const first = await tx.insert(installation).values({ id: 1 }).onConflictDoNothing().returning();
      if (first.length === 0 || !this.config.demo || !isLoopback(this.config.host)) return;
      const someone = await tx.select({ id: people.id }).from(people).limit(1);
      if (someone.length > 0) return;
      await this.seed(tx, examples);
      await tx.update(installation).set({ demoSeeded: true }).where(eq(installation.id, 1));
    });
  }

  private async seed(tx: Database, examples: readonly ExampleDto[]): Promise<void> {
    const made = await tx.insert(workspaces).values({ name: WORKSPACE, demo: true }).returning();
    const workspaceId = writtenRow(made, "workspace").id;
    const idByRole = new Map<MemberRole, string>();
    for (const role of MEMBER_ROLES) {
      const password = randomBytes(24).toString("base64url");
      const personId = await addPerson(tx, { name: `Demo ${role}`, email: `${role}@demo.invalid`, password });
      await tx.insert(members).values({ workspaceId, personId, role });
      idByRole.set(role, personId);
    }
    for (const { medium, source } of DEMO_MEDIA) {
      await this.media.create(tx, { workspaceId, medium: judgeMedium(medium), source });
    }
    const engineer = idByRole.get("engineer");
    if (engineer === undefined) throw new Error("The demo has no engineer to own its projects.");
    let left = examples;
    for (const { name, notes, takes } of DEMO_PROJECTS) {
      const taken = left.filter((example) => takes(example.name));
      left = left.filter((example) => !takes(example.name));
      if (taken.length === 0) continue;
      const projectId = await this.projects.create(tx, { workspaceId, ownerId: engineer, name, notes });
      for (const { document } of taken) {
        const judged = judgeImport(document);
        const sceneId = await this.scenes.create(tx, projectId, judged, engineer);
        const sentence = `added the example "${judged.name}"`;
        await this.activities.add(tx, { projectId, sceneId, personId: engineer, sentence });
      }
    }
  }
}
