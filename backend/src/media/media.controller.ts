import { Body, Controller, Delete, Get, HttpCode, Param, Post, Put } from "@nestjs/common";
import {
  ApiBadRequestResponse,
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
import { MediumDto, SaveMediumBody } from "../contract/media.js";
import { MediaService } from "./media.service.js";

const ID = new IdPipe("medium");

@Controller("media")
export class MediaController {
  constructor(private readonly media: MediaService) {}

  /** The workspace's library, by name. */
  @Get()
  @Needs("watch")
  @ApiOkResponse({ standardSchema: z.array(MediumDto) })
  list(@CurrentActor() actor: Actor): Promise<MediumDto[]> {
    return this.media.list(actor);
  }

  @Post()
  @Needs("scene.edit")
  @ApiCreatedResponse({ standardSchema: MediumDto })
  @ApiBadRequestResponse({ standardSchema: ErrorDto })
  create(
    @CurrentActor() actor: Actor,
    @Body({ schema: SaveMediumBody }) body: z.output<typeof SaveMediumBody>,
  ): Promise<MediumDto> {
    return this.media.create(actor, body);
  }

  @Put(":mediumId")
  @Needs("scene.edit")
  @ApiOkResponse({ standardSchema: MediumDto })
  @ApiBadRequestResponse({ standardSchema: ErrorDto })
  @ApiNotFoundResponse({ standardSchema: ErrorDto })
  update(
    @CurrentActor() actor: Actor,
    @Param("mediumId", ID) mediumId: string,
    @Body({ schema: SaveMediumBody }) body: z.output<typeof SaveMediumBody>,
  ): Promise<MediumDto> {
    return this.media.update(actor, mediumId, body);
  }

  /** Takes it out of the library; scenes that use it keep their copy. */
  @Delete(":mediumId")
  @Needs("scene.edit")
  @HttpCode(204)
  @ApiNoContentResponse()
  @ApiNotFoundResponse({ standardSchema: ErrorDto })
  remove(@CurrentActor() actor: Actor, @Param("mediumId", ID) mediumId: string): Promise<void> {
    return this.media.remove(actor, mediumId);
  }
}
