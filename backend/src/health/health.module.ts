import { Module } from "@nestjs/common";
import { AuthModule } from "../auth/auth.module.js";
import { EventLoopDelay } from "./event-loop-delay.js";
import { HealthController } from "./health.controller.js";
import { LoadController } from "./load.controller.js";

@Module({
  imports: [AuthModule],
  controllers: [HealthController, LoadController],
  providers: [EventLoopDelay],
})
export class HealthModule {}
