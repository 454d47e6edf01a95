import { Controller, Get, Inject } from "@nestjs/common";
import { ApiOkResponse } from "@nestjs/swagger";
import { sql } from "drizzle-orm";
import { z } from "zod";
import { Open } from "../common/access.js";
import { VERSION } from "../config/version.js";
import { DATABASE, type Database } from "../database/database.js";

const HealthDto = z.object({ ok: z.literal(true), version: z.string() }).meta({ id: "Health" });

@Controller("health")
export class HealthController {
  constructor(@Inject(DATABASE) private readonly db: Database) {}

  /** Answers when the server and its database do; 503 or 500 otherwise. */
  @Get()
  @Open()
  @ApiOkResponse({ standardSchema: HealthDto })
  async health(): Promise<z.infer<typeof HealthDto>> {
    await this.db.execute(sql`select 1`);
    return { ok: true, version: VERSION };
  }
}
