import { Module, type DynamicModule } from "@nestjs/common";
import { DATABASE, type Database } from "./database.js";

/** Gives every module the open database. */
@Module({})
export class DatabaseModule {
  static of(db: Database): DynamicModule {
    return {
      module: DatabaseModule,
      global: true,
      providers: [{ provide: DATABASE, useValue: db }],
      exports: [DATABASE],
    };
  }
}
