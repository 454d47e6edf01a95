import { Module } from "@nestjs/common";
import { ExamplesModule } from "../examples/examples.module.js";
import { ActivityModule } from "../projects/activity.module.js";
import { ProjectsModule } from "../projects/projects.module.js";
import { ScenesController } from "./scenes.controller.js";
import { ScenesService } from "./scenes.service.js";
import { ScenesStoreModule } from "./scenes-store.module.js";

@Module({
  imports: [ScenesStoreModule, ProjectsModule, ActivityModule, ExamplesModule],
  controllers: [ScenesController],
  providers: [ScenesService],
  exports: [ScenesService],
})
export class ScenesModule {}
