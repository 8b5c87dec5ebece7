import { Module } from '@nestjs/common';
import { SpectraController } from './spectra.controller.js';
import { SpectraService } from './spectra.service.js';
import { SpectrumChangesController } from './spectrum-changes.controller.js';
import { SpectrumChanges } from './spectrum-changes.service.js';
import { SpectrumReader } from './spectrum-reader.js';

@Module({ controllers: [SpectraController, SpectrumChangesController], providers: [SpectraService, SpectrumChanges, SpectrumReader] })
export class SpectraModule {}
