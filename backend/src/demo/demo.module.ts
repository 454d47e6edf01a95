import { Module } from "@nestjs/common";
import { ExamplesModule } from "../examples/examples.module.js";
import { MediaModule } from "../media/media.module.js";
import { ActivityModule } from "../projects/activity.module.js";
import { ProjectsModule } from "../projects/projects.module.js";
import { ScenesStoreModule } from "../scenes/scenes-store.module.js";
import { DemoSeeder } from "./demo.seeder.js";

@Module({
  imports: [ExamplesModule, MediaModule, ProjectsModule, ScenesStoreModule, ActivityModule],
  providers: [DemoSeeder],
})
export class DemoModule {}
