import type { TargetKind, UploadMeta } from '@foreveil/shared';
import { Type } from 'class-transformer';
import { IsIn, IsObject, IsString, IsUUID, Length, ValidateNested } from 'class-validator';
import { Omittable } from '../../../common/http/omittable.js';
import { Tidy } from '../../../common/http/tidy.js';
import { TARGET_KINDS } from '../../targets/dto/target.dto.js';
import { CorrectionsDto } from './corrections.dto.js';

/** The JSON text in the part `meta` of an upload. */
export class UploadMetaDto implements UploadMeta {
  @Omittable()
  @IsUUID()
  targetId?: string;

  @Omittable()
  @Tidy()
  @IsString()
  @Length(1, 120)
  targetName?: string;

  @Omittable()
  @IsIn(TARGET_KINDS)
  targetKind?: TargetKind;

  @Omittable()
  @Tidy()
  @IsString()
  @Length(1, 120)
  label?: string;

  @Omittable()
  @IsObject()
  @ValidateNested()
  @Type(() => CorrectionsDto)
  corrections?: CorrectionsDto;

  @Omittable()
  @Tidy()
  @IsString()
  @Length(1, 120)
  recipe?: string;
}
