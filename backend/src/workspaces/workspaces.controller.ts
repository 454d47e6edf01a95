import { Controller, Get } from "@nestjs/common";
import { ApiOkResponse } from "@nestjs/swagger";
import { z } from "zod";
import { Needs } from "../common/access.js";
import { CurrentActor, type Actor } from "../common/actor.js";
import { MemberDto } from "../contract/people.js";
import { MembersRepository } from "./members.repository.js";

@Controller("workspace")
export class WorkspacesController {
  constructor(private readonly members: MembersRepository) {}

  /** The members of the caller's workspace, by name. */
  @Get("members")
  @Needs()
  @ApiOkResponse({ standardSchema: z.array(MemberDto) })
  list(@CurrentActor() actor: Actor): Promise<MemberDto[]> {
    return this.members.list(actor.workspace.id);
  }
}
