import { Module } from '@nestjs/common';
import { CloudsController } from './clouds.controller.js';
import { CloudsService } from './clouds.service.js';

@Module({ controllers: [CloudsController], providers: [CloudsService] })
export class CloudsModule {}
