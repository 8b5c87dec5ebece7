import type { FileSignature, NewReadingRecipe, Reading } from '@foreveil/shared';
import { ApiProperty, PartialType } from '@nestjs/swagger';
import { Type } from 'class-transformer';
import { ArrayMaxSize, IsArray, IsIn, IsObject, IsString, Length, MaxLength, ValidateIf, ValidateNested } from 'class-validator';
import { Tidy } from '../../../common/http/tidy.js';
import { CorrectionsDto } from '../../spectra/dto/corrections.dto.js';

const FORMATS: readonly Reading['format'][] = ['fits_table', 'fits_ascii_table', 'fits_image', 'text'];
const OrNull = () => ValidateIf((_, value) => value !== null);

class SignatureDto implements FileSignature {
  @IsIn(FORMATS)
  format: Reading['format'];

  @IsArray()
  @ArrayMaxSize(1000)
  @IsString({ each: true })
  @MaxLength(200, { each: true })
  columns: string[];

  @OrNull()
  @IsString()
  @MaxLength(200)
  instrument: string | null;

  @OrNull()
  @IsString()
  @MaxLength(200)
  telescope: string | null;

  @IsArray()
  @ArrayMaxSize(100)
  @IsString({ each: true })
  @MaxLength(200, { each: true })
  writer: string[];
}

export class NewRecipeDto implements NewReadingRecipe {
  @ApiProperty({ minLength: 1, maxLength: 120 })
  @Tidy()
  @IsString()
  @Length(1, 120)
  name: string;

  @ApiProperty({ type: Object, description: 'files that the recipe is for: format, columns, instrument, telescope, writer' })
  @IsObject()
  @ValidateNested()
  @Type(() => SignatureDto)
  signature: SignatureDto;

  @ApiProperty({ type: Object, description: 'what is corrected in each of them' })
  @IsObject()
  @ValidateNested()
  @Type(() => CorrectionsDto)
  corrections: CorrectionsDto;
}

/** Only what is named changes. */
export class ChangeRecipeDto extends PartialType(NewRecipeDto, { skipNullProperties: false }) {}
