import { Module, type DynamicModule } from "@nestjs/common";
import { CONFIG, type Config } from "./config.js";

/** Gives every module the settings. */
@Module({})
export class ConfigModule {
  static of(config: Config): DynamicModule {
    return {
      module: ConfigModule,
      global: true,
      providers: [{ provide: CONFIG, useValue: config }],
      exports: [CONFIG],
    };
  }
}
