import { Module } from "@nestjs/common";
import { ExamplesModule } from "../examples/examples.module.js";
import { ScenesStoreModule } from "../scenes/scenes-store.module.js";
import { ActivityModule } from "./activity.module.js";
import { ProjectsController } from "./projects.controller.js";
import { ProjectsRepository } from "./projects.repository.js";
import { ProjectsService } from "./projects.service.js";

@Module({
  imports: [ExamplesModule, ScenesStoreModule, ActivityModule],
  controllers: [ProjectsController],
  providers: [ProjectsService, ProjectsRepository],
  exports: [ProjectsService, ProjectsRepository],
})
export class ProjectsModule {}
