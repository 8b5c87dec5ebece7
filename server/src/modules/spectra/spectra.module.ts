import { Module } from '@nestjs/common';
import { MulterModule } from '@nestjs/platform-express';
import { memoryStorage } from 'multer';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { SpectraController } from './spectra.controller.js';
import { SpectraService } from './spectra.service.js';

@Module({
  imports: [
    MulterModule.registerAsync({
      inject: [CONFIG],
      useFactory: (config: Config) => ({
        storage: memoryStorage(),
        defParamCharset: 'utf8',
        limits: { fileSize: config.uploadLimitBytes, files: 1, fields: 1, fieldSize: 64 * 1024, parts: 2, headerPairs: 20 },
      }),
    }),
  ],
  controllers: [SpectraController],
  providers: [SpectraService],
})
export class SpectraModule {}
