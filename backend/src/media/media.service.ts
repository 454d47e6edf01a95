import { Inject, Injectable } from "@nestjs/common";
import type { z } from "zod";
import type { Actor } from "../common/actor.js";
import { isDuplicate } from "../common/failures.js";
import { notFound, Refusal } from "../common/refusal.js";
import type { MediumDto, SaveMediumBody } from "../contract/media.js";
import { DATABASE, type Database } from "../database/database.js";
import { judgeMedium } from "./judge.js";
import { MediaRepository, type MediumRecord } from "./media.repository.js";

type Body = z.output<typeof SaveMediumBody>;

const toDto = ({ id, medium, source, updatedAt }: MediumRecord): MediumDto => ({
  id,
  medium,
  source,
  updatedAt: updatedAt.toISOString(),
});

/** The library of media of the caller's workspace; scenes copy from it, so that a change leaves them alone. */
@Injectable()
export class MediaService {
  constructor(
    @Inject(DATABASE) private readonly db: Database,
    private readonly media: MediaRepository,
  ) {}

  async list(actor: Actor): Promise<MediumDto[]> {
    return (await this.media.list(actor.workspace.id)).map(toDto);
  }

  async create(actor: Actor, body: Body): Promise<MediumDto> {
    const medium = judgeMedium(body.medium);
    const { source } = body;
    const values = { workspaceId: actor.workspace.id, medium, source };
    return toDto(await this.oncePerId(medium.id, () => this.media.create(this.db, values)));
  }

  /** @throws Refusal "not-found" */
  async update(actor: Actor, mediumId: string, body: Body): Promise<MediumDto> {
    const medium = judgeMedium(body.medium);
    const { source } = body;
    const row = await this.oncePerId(medium.id, () =>
      this.media.update(actor.workspace.id, mediumId, { medium, source }),
    );
    if (row === null) throw notFound("medium");
    return toDto(row);
  }

  /** @throws Refusal "not-found" */
  async remove(actor: Actor, mediumId: string): Promise<void> {
    if (!(await this.media.remove(actor.workspace.id, mediumId))) throw notFound("medium");
  }

  private async oncePerId<T>(id: string, write: () => Promise<T>): Promise<T> {
    try {
      return await write();
    } catch (error) {
      if (!isDuplicate(error)) throw error;
      const sentence = `The library already has a medium with the id "${id}": choose another id.`;
      throw new Refusal("bad-request", sentence, { problems: [{ path: "id", sentence }] });
    }
  }
}
