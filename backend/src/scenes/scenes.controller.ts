import { Body, Controller, Delete, Get, HttpCode, Param, Post, Put, Query, Res } from "@nestjs/common";
import {
  ApiConflictResponse,
  ApiCreatedResponse,
  ApiNoContentResponse,
  ApiNotFoundResponse,
  ApiOkResponse,
  ApiPayloadTooLargeResponse,
  ApiUnprocessableEntityResponse,
} from "@nestjs/swagger";
import type { Response } from "express";
import { z } from "zod";
import { Needs } from "../common/access.js";
import { CurrentActor, type Actor } from "../common/actor.js";
import { IdPipe } from "../common/validation.js";
import { ErrorDto } from "../contract/errors.js";
import {
  CopySceneBody,
  CreateSceneBody,
  RevisionDto,
  SaveSceneBody,
  SceneDto,
  SceneSummaryDto,
  StaleRevisionDto,
} from "../contract/scenes.js";
import { attachment } from "./attachment.js";
import { ScenesService } from "./scenes.service.js";

const PROJECT = new IdPipe("project");
const SCENE = new IdPipe("scene");
const RevisionNumber = z.coerce.number().pipe(z.int().min(1).max(2_147_483_647));
const ExportQuery = z.object({ revision: RevisionNumber.optional() });

@Controller()
export class ScenesController {
  constructor(private readonly scenes: ScenesService) {}

  /** A project's scenes, by name, each with its latest revision. */
  @Get("projects/:projectId/scenes")
  @Needs("watch")
  @ApiOkResponse({ standardSchema: z.array(SceneSummaryDto) })
  @ApiNotFoundResponse({ standardSchema: ErrorDto })
  list(
    @CurrentActor() actor: Actor,
    @Param("projectId", PROJECT) projectId: string,
  ): Promise<SceneSummaryDto[]> {
    return this.scenes.list(actor, projectId);
  }

  /** Adds a scene: imported, from an example, or an empty sheet. */
  @Post("projects/:projectId/scenes")
  @Needs("scene.edit")
  @ApiCreatedResponse({ standardSchema: SceneDto })
  @ApiNotFoundResponse({ standardSchema: ErrorDto })
  @ApiPayloadTooLargeResponse({ standardSchema: ErrorDto })
  @ApiUnprocessableEntityResponse({ description: "Every problem of the document", standardSchema: ErrorDto })
  create(
    @CurrentActor() actor: Actor,
    @Param("projectId", PROJECT) projectId: string,
    @Body({ schema: CreateSceneBody }) body: z.output<typeof CreateSceneBody>,
  ): Promise<SceneDto> {
    return this.scenes.create(actor, projectId, body);
  }

  /** The latest revision. */
  @Get("scenes/:sceneId")
  @Needs("watch")
  @ApiOkResponse({ standardSchema: SceneDto })
  @ApiNotFoundResponse({ standardSchema: ErrorDto })
  get(@CurrentActor() actor: Actor, @Param("sceneId", SCENE) sceneId: string): Promise<SceneDto> {
    return this.scenes.get(actor, sceneId);
  }

  /** Keeps the document as the next revision. */
  @Put("scenes/:sceneId")
  @Needs("scene.edit")
  @ApiOkResponse({ standardSchema: SceneDto })
  @ApiNotFoundResponse({ standardSchema: ErrorDto })
  @ApiConflictResponse({
    description: "Somebody saved in the meantime: what stands now, and what they changed",
    standardSchema: StaleRevisionDto,
  })
  @ApiPayloadTooLargeResponse({ standardSchema: ErrorDto })
  @ApiUnprocessableEntityResponse({ description: "Every problem of the document", standardSchema: ErrorDto })
  save(
    @CurrentActor() actor: Actor,
    @Param("sceneId", SCENE) sceneId: string,
    @Body({ schema: SaveSceneBody }) body: z.output<typeof SaveSceneBody>,
  ): Promise<SceneDto> {
    return this.scenes.save(actor, sceneId, body);
  }

  /** Deletes it with all its revisions and runs. */
  @Delete("scenes/:sceneId")
  @Needs("workspace.administer")
  @HttpCode(204)
  @ApiNoContentResponse()
  @ApiNotFoundResponse({ standardSchema: ErrorDto })
  @ApiConflictResponse({ standardSchema: ErrorDto })
  remove(@CurrentActor() actor: Actor, @Param("sceneId", SCENE) sceneId: string): Promise<void> {
    return this.scenes.remove(actor, sceneId);
  }

  /** Keeps the caller's document as a new scene beside the one that stands. */
  @Post("scenes/:sceneId/copies")
  @Needs("scene.edit")
  @ApiCreatedResponse({ standardSchema: SceneDto })
  @ApiNotFoundResponse({ standardSchema: ErrorDto })
  @ApiPayloadTooLargeResponse({ standardSchema: ErrorDto })
  @ApiUnprocessableEntityResponse({ description: "Every problem of the document", standardSchema: ErrorDto })
  copy(
    @CurrentActor() actor: Actor,
    @Param("sceneId", SCENE) sceneId: string,
    @Body({ schema: CopySceneBody }) body: z.output<typeof CopySceneBody>,
  ): Promise<SceneDto> {
    return this.scenes.copy(actor, sceneId, body);
  }

  /** Its revisions, newest first, without the documents. */
  @Get("scenes/:sceneId/revisions")
  @Needs("watch")
  @ApiOkResponse({ standardSchema: z.array(RevisionDto) })
  @ApiNotFoundResponse({ standardSchema: ErrorDto })
  revisions(@CurrentActor() actor: Actor, @Param("sceneId", SCENE) sceneId: string): Promise<RevisionDto[]> {
    return this.scenes.revisions(actor, sceneId);
  }

  /** One revision, whole. */
  @Get("scenes/:sceneId/revisions/:revision")
  @Needs("watch")
  @ApiOkResponse({ standardSchema: SceneDto })
  @ApiNotFoundResponse({ standardSchema: ErrorDto })
  revision(
    @CurrentActor() actor: Actor,
    @Param("sceneId", SCENE) sceneId: string,
    @Param("revision", { schema: RevisionNumber }) revision: number,
  ): Promise<SceneDto> {
    return this.scenes.getRevision(actor, sceneId, revision);
  }

  /** The scene as a file: the latest revision, or the one asked for. */
  @Get("scenes/:sceneId/document")
  @Needs("watch")
  @ApiOkResponse({ description: "A scene document, to keep as a file", schema: { type: "object" } })
  @ApiNotFoundResponse({ standardSchema: ErrorDto })
  async download(
    @CurrentActor() actor: Actor,
    @Param("sceneId", SCENE) sceneId: string,
    @Query({ schema: ExportQuery }) query: z.output<typeof ExportQuery>,
    @Res({ passthrough: true }) response: Response,
  ): Promise<Record<string, unknown>> {
    const { revision } = query;
    const scene =
      revision === undefined
        ? await this.scenes.get(actor, sceneId)
        : await this.scenes.getRevision(actor, sceneId, revision);
    response.setHeader("content-disposition", attachment(`${scene.name} r${scene.revision}.scene.json`));
    return scene.document;
  }
}
