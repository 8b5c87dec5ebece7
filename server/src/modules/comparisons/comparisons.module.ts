import { Module } from '@nestjs/common';
import { ComparisonsController } from './comparisons.controller.js';
import { ComparisonsService } from './comparisons.service.js';
import { RulingsService } from './rulings.service.js';

@Module({ controllers: [ComparisonsController], providers: [ComparisonsService, RulingsService] })
export class ComparisonsModule {}
