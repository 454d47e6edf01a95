import { Module, type DynamicModule } from "@nestjs/common";
import { AuthModule } from "./auth/auth.module.js";
import type { BetterAuth } from "./auth/better-auth.js";
import { BetterAuthModule } from "./auth/better-auth.module.js";
import { CommonModule } from "./common/common.module.js";
import type { Config } from "./config/config.js";
import { ConfigModule } from "./config/config.module.js";
import type { DataFolder } from "./config/data-folder.js";
import type { OpenDatabase } from "./database/database.js";
import { DatabaseModule } from "./database/database.module.js";
import { DemoModule } from "./demo/demo.module.js";
import { ExamplesModule } from "./examples/examples.module.js";
import { HealthModule } from "./health/health.module.js";
import { MediaModule } from "./media/media.module.js";
import { ProjectsModule } from "./projects/projects.module.js";
import { RunsModule } from "./runs/runs.module.js";
import { ScenesModule } from "./scenes/scenes.module.js";
import { WorkspacesModule } from "./workspaces/workspaces.module.js";

/** What is opened before the modules are put together. */
export interface Foundations {
  config: Config;
  folder: DataFolder;
  database: OpenDatabase;
  betterAuth: BetterAuth;
}

@Module({})
export class AppModule {
  static of({ config, folder, database, betterAuth }: Foundations): DynamicModule {
    return {
      module: AppModule,
      imports: [
        ConfigModule.of(config),
        DatabaseModule.of(database, folder),
        BetterAuthModule.of(betterAuth),
        CommonModule,
        AuthModule,
        WorkspacesModule,
        ProjectsModule,
        ScenesModule,
        MediaModule,
        ExamplesModule,
        RunsModule,
        DemoModule,
        HealthModule,
      ],
    };
  }
}
