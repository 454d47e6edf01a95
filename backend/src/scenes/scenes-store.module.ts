import { Module } from "@nestjs/common";
import { ScenesRepository } from "./scenes.repository.js";

/** The scenes' tables without their routes, for modules that stand below those. */
@Module({ providers: [ScenesRepository], exports: [ScenesRepository] })
export class ScenesStoreModule {}
