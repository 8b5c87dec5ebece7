import { Module } from '@nestjs/common';
import { LineListsController } from './linelists.controller.js';

@Module({ controllers: [LineListsController] })
export class LineListsModule {}
