import { Module } from '@nestjs/common';
import { UnplacedController } from './unplaced.controller.js';
import { UnplacedService } from './unplaced.service.js';

@Module({ controllers: [UnplacedController], providers: [UnplacedService] })
export class UnplacedModule {}
