import type { AnalysisSettings, NewAnalysis } from '@foreveil/shared';
import { ApiProperty } from '@nestjs/swagger';
import { IsObject, IsUUID } from 'class-validator';
import { Omittable } from '../../../common/http/omittable.js';

/** The settings themselves are checked by the rules they share with the screens: see check-settings.ts. */
export class NewAnalysisDto implements NewAnalysis {
  @ApiProperty({ required: false, format: 'uuid', description: 'line list to use; the default one when left out' })
  @Omittable()
  @IsUUID()
  lineListId?: string;

  @ApiProperty({ required: false, type: Object, description: 'settings that differ from the defaults' })
  @Omittable()
  @IsObject()
  settings?: Partial<AnalysisSettings>;
}
