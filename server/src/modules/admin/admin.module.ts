import { Module } from '@nestjs/common';
import { InvitationsModule } from '../invitations/invitations.module.js';
import { AdminController } from './admin.controller.js';
import { AdminService } from './admin.service.js';

@Module({ imports: [InvitationsModule], controllers: [AdminController], providers: [AdminService] })
export class AdminModule {}
