import { join } from "node:path";
import { Module } from "@nestjs/common";
import { CONFIG, type Config } from "../config/config.js";
import { ARRAY_STORE } from "./array-store.js";
import { FolderArrayStore } from "./folder-array-store.js";

@Module({
  providers: [
    {
      provide: ARRAY_STORE,
      useFactory: (config: Config) => new FolderArrayStore(join(config.dataDir, "arrays")),
      inject: [CONFIG],
    },
  ],
  exports: [ARRAY_STORE],
})
export class StorageModule {}
