import { Module } from '@nestjs/common';
import { IdentificationsController } from './identifications.controller.js';
import { IdentificationsService } from './identifications.service.js';

@Module({ controllers: [IdentificationsController], providers: [IdentificationsService] })
export class IdentificationsModule {}
