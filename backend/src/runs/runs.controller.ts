import { Readable } from "node:stream";
import { Body, Controller, Get, HttpCode, Param, Post, StreamableFile } from "@nestjs/common";
import {
  ApiBadRequestResponse,
  ApiConflictResponse,
  ApiCreatedResponse,
  ApiNotFoundResponse,
  ApiOkResponse,
  ApiTooManyRequestsResponse,
  ApiUnprocessableEntityResponse,
} from "@nestjs/swagger";
import { resultSchema } from "@heddle/kernels/scene";
import { z } from "zod";
import { Needs } from "../common/access.js";
import { CurrentActor, type Actor } from "../common/actor.js";
import { Refusal } from "../common/refusal.js";
import { IdPipe } from "../common/validation.js";
import { ErrorDto } from "../contract/errors.js";
import {
  LiveEditBody,
  LiveEditDto,
  RunCommandBody,
  RunDto,
  StartRunBody,
  type RunCommand,
} from "../contract/runs.js";
import { ResultsService } from "./results.service.js";
import { RunsService } from "./runs.service.js";

const refusal = (description: string) => ({ description, standardSchema: ErrorDto });
const ResultDto = resultSchema.meta({ id: "Result" });

@Controller()
@ApiNotFoundResponse(refusal("Not there, or not in your workspace"))
export class RunsController {
  constructor(
    private readonly runs: RunsService,
    private readonly results: ResultsService,
  ) {}

  /** Puts a run of the scene's revision into the queue. */
  @Post("scenes/:sceneId/runs")
  @Needs("run.control")
  @ApiCreatedResponse({ standardSchema: RunDto })
  @ApiUnprocessableEntityResponse(refusal("The scene is refused; every problem is named"))
  @ApiTooManyRequestsResponse(refusal("The queue is full"))
  start(
    @CurrentActor() actor: Actor,
    @Param("sceneId", new IdPipe("scene")) sceneId: string,
    @Body({ schema: StartRunBody }) body: z.output<typeof StartRunBody>,
  ): Promise<RunDto> {
    return this.runs.start(actor, sceneId, body);
  }

  /** The scene's runs, newest first. */
  @Get("scenes/:sceneId/runs")
  @Needs("watch")
  @ApiOkResponse({ standardSchema: z.array(RunDto) })
  list(
    @CurrentActor() actor: Actor,
    @Param("sceneId", new IdPipe("scene")) sceneId: string,
  ): Promise<RunDto[]> {
    return this.runs.listOfScene(actor, sceneId);
  }

  /** A run as it stands. */
  @Get("runs/:runId")
  @Needs("watch")
  @ApiOkResponse({ standardSchema: RunDto })
  get(@CurrentActor() actor: Actor, @Param("runId", new IdPipe("run")) runId: string): Promise<RunDto> {
    return this.runs.get(actor, runId);
  }

  /** Pauses, resumes, steps, stops or paces a run; answers how it then stands. */
  @Post("runs/:runId/commands")
  @HttpCode(200)
  @Needs("run.control")
  @ApiOkResponse({ standardSchema: RunDto })
  @ApiConflictResponse(refusal("The run's state does not allow it"))
  command(
    @CurrentActor() actor: Actor,
    @Param("runId", new IdPipe("run")) runId: string,
    @Body({ schema: RunCommandBody }) command: RunCommand,
  ): Promise<RunDto> {
    return this.runs.command(actor, runId, command);
  }

  /** Changes paint, media or sources of a run that goes on. */
  @Post("runs/:runId/edits")
  @HttpCode(200)
  @Needs("run.control")
  @ApiOkResponse({ standardSchema: LiveEditDto })
  @ApiBadRequestResponse(refusal("The body is no scene document"))
  @ApiConflictResponse(refusal("The run's state does not allow it"))
  @ApiUnprocessableEntityResponse(refusal("The edit is refused; every reason is named"))
  edit(
    @CurrentActor() actor: Actor,
    @Param("runId", new IdPipe("run")) runId: string,
    @Body({ schema: LiveEditBody }) body: z.output<typeof LiveEditBody>,
  ): Promise<z.infer<typeof LiveEditDto>> {
    return this.runs.edit(actor, runId, body.document);
  }

  /** The result document of a run that ended with one. */
  @Get("runs/:runId/result")
  @Needs("watch")
  @ApiOkResponse({ standardSchema: ResultDto })
  @ApiConflictResponse(refusal("The run has no result, or none yet"))
  async result(
    @CurrentActor() actor: Actor,
    @Param("runId", new IdPipe("run")) runId: string,
  ): Promise<StreamableFile> {
    const run = await this.runs.record(actor, runId);
    const pieces = await this.results.document(runId);
    if (pieces === null) throw new Refusal("wrong-state", noResult(run.message, run.endedAt === null));
    return new StreamableFile(Readable.from(pieces), { type: "application/json; charset=utf-8" });
  }
}

function noResult(message: string | null, goesOn: boolean): string {
  if (goesOn) return "This run has no result yet: wait for its end or stop it.";
  return message === null
    ? "This run has no result: run the scene again."
    : `This run has no result. ${message}`;
}
