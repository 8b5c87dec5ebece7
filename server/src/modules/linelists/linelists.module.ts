import { Module } from '@nestjs/common';
import { MulterModule } from '@nestjs/platform-express';
import { memoryStorage } from 'multer';
import { LineListsController } from './linelists.controller.js';
import { LineListsService } from './line-lists.service.js';
import { ProgrammeLineListsController } from './programme-line-lists.controller.js';

const MOST_BYTES = 64 * 1024 * 1024;

@Module({
  imports: [
    MulterModule.register({
      storage: memoryStorage(),
      defParamCharset: 'utf8',
      limits: { fileSize: MOST_BYTES, files: 1, fields: 1, fieldSize: 512 * 1024, parts: 2, headerPairs: 20 },
    }),
  ],
  controllers: [LineListsController, ProgrammeLineListsController],
  providers: [LineListsService],
})
export class LineListsModule {}
