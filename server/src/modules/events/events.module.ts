import { Module } from '@nestjs/common';
import { EventsController } from './events.controller.js';
import { ProgrammeEvents } from './programme-events.service.js';

@Module({ controllers: [EventsController], providers: [ProgrammeEvents] })
export class EventsModule {}
