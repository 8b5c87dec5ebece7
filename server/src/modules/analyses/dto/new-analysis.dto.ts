import type { AnalysisSettings, NewAnalysis } from '@foreveil/shared';
import { ApiProperty } from '@nestjs/swagger';
import { IsObject } from 'class-validator';
import { Omittable } from '../../../common/http/omittable.js';

/** The settings themselves are checked by the rules they share with the screens: see check-settings.ts. */
export class NewAnalysisDto implements NewAnalysis {
  @ApiProperty({ required: false, type: Object, description: 'settings that differ from the defaults' })
  @Omittable()
  @IsObject()
  settings?: Partial<AnalysisSettings>;
}
