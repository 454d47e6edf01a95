import { Controller, Get } from "@nestjs/common";
import { ApiOkResponse } from "@nestjs/swagger";
import { z } from "zod";
import { Needs } from "../common/access.js";
import { EventLoopDelay } from "./event-loop-delay.js";

const LoadDto = z
  .object({
    /** Of the server's event loop, since this was last asked. */
    eventLoopDelayMs: z.object({ p50: z.number(), p99: z.number(), max: z.number(), overMs: z.number() }),
    /** Resident memory of the process, in bytes. */
    residentBytes: z.number(),
    /** Processor time of the process so far, all threads together, in milliseconds. */
    cpuMs: z.number(),
  })
  .meta({ id: "Load" });

@Controller("health")
export class LoadController {
  constructor(private readonly delay: EventLoopDelay) {}

  /** How busy the server is. */
  @Get("load")
  @Needs("workspace.administer")
  @ApiOkResponse({ standardSchema: LoadDto })
  load(): z.infer<typeof LoadDto> {
    const { user, system } = process.cpuUsage();
    return {
      eventLoopDelayMs: this.delay.take(),
      residentBytes: process.memoryUsage.rss(),
      cpuMs: (user + system) / 1000,
    };
  }
}
