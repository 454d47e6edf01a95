import { Inject, Module, type DynamicModule, type OnApplicationShutdown } from "@nestjs/common";
import type { DataFolder } from "../config/data-folder.js";
import { DATABASE, type OpenDatabase } from "./database.js";

interface Held {
  database: OpenDatabase;
  folder: DataFolder;
}

const HELD = Symbol("held");

/**
 * Gives every module the open database. It closes it, and lets go of the data folder, in the last round of a
 * shutdown: whatever still has to be written is written in the rounds before.
 */
@Module({})
export class DatabaseModule implements OnApplicationShutdown {
  constructor(@Inject(HELD) private readonly held: Held) {}

  static of(database: OpenDatabase, folder: DataFolder): DynamicModule {
    const held: Held = { database, folder };
    return {
      module: DatabaseModule,
      global: true,
      providers: [
        { provide: DATABASE, useValue: database.db },
        { provide: HELD, useValue: held },
      ],
      exports: [DATABASE],
    };
  }

  async onApplicationShutdown(): Promise<void> {
    await this.held.database.close();
    await this.held.folder.release();
  }
}
