import { Module } from "@nestjs/common";
import { MembersRepository } from "./members.repository.js";
import { WorkspacesController } from "./workspaces.controller.js";

@Module({
  controllers: [WorkspacesController],
  providers: [MembersRepository],
  exports: [MembersRepository],
})
export class WorkspacesModule {}
