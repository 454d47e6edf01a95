import { Controller, Get, Param, Res } from "@nestjs/common";
import { ApiNotFoundResponse, ApiOkResponse, ApiProduces } from "@nestjs/swagger";
import type { Response } from "express";
import { z } from "zod";
import { Needs } from "../common/access.js";
import { ErrorDto } from "../contract/errors.js";
import { ExampleDto } from "../contract/scenes.js";
import { ExamplesService } from "./examples.service.js";

@Controller("examples")
export class ExamplesController {
  constructor(private readonly examples: ExamplesService) {}

  /** The scenes that come with Heddle. */
  @Get()
  @Needs()
  @ApiOkResponse({ standardSchema: z.array(ExampleDto) })
  list(): Promise<ExampleDto[]> {
    return this.examples.list();
  }

  /** A small picture of an example. */
  @Get(":name/thumbnail.png")
  @Needs()
  @ApiProduces("image/png")
  @ApiOkResponse({ schema: { type: "string", format: "binary" } })
  @ApiNotFoundResponse({ standardSchema: ErrorDto })
  async thumbnail(@Param("name") name: string, @Res() response: Response): Promise<void> {
    const file = await this.examples.thumbnail(name);
    response.sendFile(file, { maxAge: "1h" });
  }
}
