import type { AnalysisRecipeChange, AnalysisSettings, NewAnalysisRecipe } from '@foreveil/shared';
import { ApiProperty, PartialType } from '@nestjs/swagger';
import { IsObject, IsString, Length } from 'class-validator';
import { Tidy } from '../../../common/http/tidy.js';

/** Settings are checked by the rules they share with the screens: see analyses/check-settings.ts. */
export class NewAnalysisRecipeDto implements NewAnalysisRecipe {
  @ApiProperty({ minLength: 1, maxLength: 120 })
  @Tidy()
  @IsString()
  @Length(1, 120)
  name: string;

  @ApiProperty({ type: Object, description: 'settings that differ from the defaults' })
  @IsObject()
  settings: Partial<AnalysisSettings>;
}

/** Only what is named changes. */
export class ChangeAnalysisRecipeDto
  extends PartialType(NewAnalysisRecipeDto, { skipNullProperties: false })
  implements AnalysisRecipeChange {}
