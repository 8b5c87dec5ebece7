import { Module } from '@nestjs/common';
import { InvitationsController } from './invitations.controller.js';
import { InvitationsService } from './invitations.service.js';
import { JoiningController } from './joining.controller.js';
import { JoiningService } from './joining.service.js';

@Module({
  controllers: [InvitationsController, JoiningController],
  providers: [InvitationsService, JoiningService],
  exports: [InvitationsService],
})
export class InvitationsModule {}
