import { Module } from "@nestjs/common";
import { WorkspacesModule } from "../workspaces/workspaces.module.js";
import { AuthController } from "./auth.controller.js";
import { AuthService } from "./auth.service.js";
import { FirstOwnerService } from "./first-owner.service.js";

@Module({
  imports: [WorkspacesModule],
  controllers: [AuthController],
  providers: [AuthService, FirstOwnerService],
  exports: [AuthService],
})
export class AuthModule {}
