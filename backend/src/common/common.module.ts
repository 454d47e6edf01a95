import { Global, Module } from "@nestjs/common";
import { APP_FILTER, APP_GUARD, APP_PIPE } from "@nestjs/core";
import { AuthModule } from "../auth/auth.module.js";
import { AccessGuard } from "./access.guard.js";
import { ErrorFilter } from "./error.filter.js";
import { OriginPolicy } from "./origin-policy.js";
import { contractPipe } from "./validation.js";

/** What stands before and behind every route. */
@Global()
@Module({
  imports: [AuthModule],
  providers: [
    OriginPolicy,
    { provide: APP_GUARD, useClass: AccessGuard },
    { provide: APP_FILTER, useClass: ErrorFilter },
    { provide: APP_PIPE, useFactory: contractPipe },
  ],
  exports: [OriginPolicy],
})
export class CommonModule {}
