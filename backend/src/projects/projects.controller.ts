import { Body, Controller, Delete, Get, HttpCode, Param, Patch, Post } from "@nestjs/common";
import {
  ApiBadRequestResponse,
  ApiConflictResponse,
  ApiCreatedResponse,
  ApiNoContentResponse,
  ApiNotFoundResponse,
  ApiOkResponse,
} from "@nestjs/swagger";
import { z } from "zod";
import { Needs } from "../common/access.js";
import { CurrentActor, type Actor } from "../common/actor.js";
import { IdPipe } from "../common/validation.js";
import { ErrorDto } from "../contract/errors.js";
import { ActivityDto, CreateProjectBody, ProjectDto, UpdateProjectBody } from "../contract/projects.js";
import { ProjectsService } from "./projects.service.js";

const ID = new IdPipe("project");

@Controller("projects")
export class ProjectsController {
  constructor(private readonly projects: ProjectsService) {}

  /** The workspace's projects, by name. */
  @Get()
  @Needs("watch")
  @ApiOkResponse({ standardSchema: z.array(ProjectDto) })
  list(@CurrentActor() actor: Actor): Promise<ProjectDto[]> {
    return this.projects.list(actor);
  }

  /** Makes a project, empty or with an example's scene. */
  @Post()
  @Needs("scene.edit")
  @ApiCreatedResponse({ standardSchema: ProjectDto })
  @ApiBadRequestResponse({ standardSchema: ErrorDto })
  create(
    @CurrentActor() actor: Actor,
    @Body({ schema: CreateProjectBody }) body: z.output<typeof CreateProjectBody>,
  ): Promise<ProjectDto> {
    return this.projects.create(actor, body);
  }

  @Get(":projectId")
  @Needs("watch")
  @ApiOkResponse({ standardSchema: ProjectDto })
  @ApiNotFoundResponse({ standardSchema: ErrorDto })
  get(@CurrentActor() actor: Actor, @Param("projectId", ID) projectId: string): Promise<ProjectDto> {
    return this.projects.get(actor, projectId);
  }

  /** Changes its name or notes. */
  @Patch(":projectId")
  @Needs("scene.edit")
  @ApiOkResponse({ standardSchema: ProjectDto })
  @ApiNotFoundResponse({ standardSchema: ErrorDto })
  update(
    @CurrentActor() actor: Actor,
    @Param("projectId", ID) projectId: string,
    @Body({ schema: UpdateProjectBody }) body: z.output<typeof UpdateProjectBody>,
  ): Promise<ProjectDto> {
    return this.projects.update(actor, projectId, body);
  }

  /** Deletes it with all its scenes and runs. */
  @Delete(":projectId")
  @Needs("workspace.administer")
  @HttpCode(204)
  @ApiNoContentResponse()
  @ApiNotFoundResponse({ standardSchema: ErrorDto })
  @ApiConflictResponse({ standardSchema: ErrorDto })
  remove(@CurrentActor() actor: Actor, @Param("projectId", ID) projectId: string): Promise<void> {
    return this.projects.remove(actor, projectId);
  }

  /** What was done in it, newest first. */
  @Get(":projectId/activity")
  @Needs("watch")
  @ApiOkResponse({ standardSchema: z.array(ActivityDto) })
  @ApiNotFoundResponse({ standardSchema: ErrorDto })
  activity(@CurrentActor() actor: Actor, @Param("projectId", ID) projectId: string): Promise<ActivityDto[]> {
    return this.projects.activity(actor, projectId);
  }
}
