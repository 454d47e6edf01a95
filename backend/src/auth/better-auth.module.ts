import { Module, type DynamicModule } from "@nestjs/common";
import { BETTER_AUTH, type BetterAuth } from "./better-auth.js";

/** Gives every module the one better-auth instance. */
@Module({})
export class BetterAuthModule {
  static of(betterAuth: BetterAuth): DynamicModule {
    return {
      module: BetterAuthModule,
      global: true,
      providers: [{ provide: BETTER_AUTH, useValue: betterAuth }],
      exports: [BETTER_AUTH],
    };
  }
}
