import { Module } from "@nestjs/common";
import { AuthModule } from "../auth/auth.module.js";
import { StorageModule } from "../storage/storage.module.js";
import { Dispatcher } from "./live/dispatcher.js";
import { RunEndings } from "./live/run-endings.js";
import { SolverThreads, WorkerSolverThreads } from "./live/solver-thread.js";
import { defaultQueueLimits, QUEUE_LIMITS } from "./queue/queue-limits.js";
import { ResultsService } from "./results.service.js";
import { RunsController } from "./runs.controller.js";
import { RunsRepository } from "./runs.repository.js";
import { RunsService } from "./runs.service.js";
import { RunsGateway } from "./stream/runs.gateway.js";
import { StreamDoor } from "./stream/stream-door.js";
import { StreamHub } from "./stream/stream-hub.js";

@Module({
  imports: [AuthModule, StorageModule],
  controllers: [RunsController],
  providers: [
    { provide: QUEUE_LIMITS, useFactory: defaultQueueLimits },
    { provide: SolverThreads, useClass: WorkerSolverThreads },
    RunsRepository,
    RunEndings,
    Dispatcher,
    RunsService,
    ResultsService,
    StreamHub,
    StreamDoor,
    RunsGateway,
  ],
})
export class RunsModule {}
