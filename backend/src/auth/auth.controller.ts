import { Body, Controller, Get, HttpCode, Post, Req, Res } from "@nestjs/common";
import {
  ApiBadRequestResponse,
  ApiConflictResponse,
  ApiNoContentResponse,
  ApiOkResponse,
} from "@nestjs/swagger";
import type { Request, Response } from "express";
import type { z } from "zod";
import { Needs, Open } from "../common/access.js";
import { CurrentActor, type Actor } from "../common/actor.js";
import { OriginPolicy } from "../common/origin-policy.js";
import { Refusal } from "../common/refusal.js";
import { ErrorDto } from "../contract/errors.js";
import { DemoSignInBody, FirstOwnerBody, SessionDto, WelcomeDto } from "../contract/people.js";
import { permissionsOf } from "../contract/permissions.js";
import { MembersRepository } from "../workspaces/members.repository.js";
import { AuthService } from "./auth.service.js";
import { FirstOwnerService } from "./first-owner.service.js";
import { VERSION } from "../config/version.js";

/** Who is there, and the ways in that need no password. */
@Controller()
export class AuthController {
  constructor(
    private readonly auth: AuthService,
    private readonly firstOwner: FirstOwnerService,
    private readonly members: MembersRepository,
    private readonly origins: OriginPolicy,
  ) {}

  /** What the sign-in page offers to this caller. */
  @Get("welcome")
  @Open()
  @ApiOkResponse({ standardSchema: WelcomeDto })
  async welcome(@Req() request: Request): Promise<WelcomeDto> {
    const demo = this.origins.isLocal(request) ? await this.members.demoPeople() : [];
    return {
      needsFirstOwner: await this.firstOwner.isNeeded(),
      demo: demo.map(({ role, name }) => ({ role, name })),
      version: VERSION,
    };
  }

  /** The signed-in person, their workspace and what they may do. */
  @Get("session")
  @Needs()
  @ApiOkResponse({ standardSchema: SessionDto })
  session(@CurrentActor() actor: Actor): SessionDto {
    return { ...actor, permissions: [...permissionsOf(actor.role)] };
  }

  /** Signs in as one of the demo's people; only for someone at this very machine. */
  @Post("demo-sign-in")
  @Open()
  @HttpCode(204)
  @ApiNoContentResponse({ description: "Signed in: the answer sets the session's cookie" })
  @ApiBadRequestResponse({ standardSchema: ErrorDto })
  async demoSignIn(
    @Body({ schema: DemoSignInBody }) body: z.output<typeof DemoSignInBody>,
    @Req() request: Request,
    @Res({ passthrough: true }) response: Response,
  ): Promise<void> {
    const demo = this.origins.isLocal(request) ? await this.members.demoPeople() : [];
    const person = demo.find(({ role }) => role === body.role);
    if (person === undefined) {
      throw new Refusal(
        "not-found",
        "There is no demo sign-in here: it exists only where the demo was seeded, for a browser on the same machine.",
      );
    }
    response.append("set-cookie", await this.auth.openSession(person.id));
  }

  /** Makes the first owner and their workspace, once. */
  @Post("first-owner")
  @Open()
  @HttpCode(204)
  @ApiNoContentResponse({ description: "Made and signed in: the answer sets the session's cookie" })
  @ApiBadRequestResponse({ standardSchema: ErrorDto })
  @ApiConflictResponse({ standardSchema: ErrorDto })
  async makeFirstOwner(
    @Body({ schema: FirstOwnerBody }) body: z.output<typeof FirstOwnerBody>,
    @Res({ passthrough: true }) response: Response,
  ): Promise<void> {
    const personId = await this.firstOwner.make(body);
    response.append("set-cookie", await this.auth.openSession(personId));
  }
}
