import { REVIEW_STATES, SEARCH_ORDERS, type IdentificationQuery, type ReviewState, type SearchOrder } from '@foreveil/shared';
import { ApiProperty } from '@nestjs/swagger';
import { Type } from 'class-transformer';
import { IsIn, IsInt, IsNumber, IsObject, IsString, IsUUID, Length, Max, MaxLength, Min, ValidateNested } from 'class-validator';
import { Omittable } from '../../../common/http/omittable.js';
import { Tidy } from '../../../common/http/tidy.js';

const FAMILIES = ['stellar', 'interstellar', 'nebular', 'telluric'];

/** A number of the query, which arrives as text. */
function Bound(description: string, least: number): PropertyDecorator {
  const parts = [
    ApiProperty({ required: false, type: Number, description }),
    Omittable(),
    Type(() => Number),
    IsNumber({ allowNaN: false, allowInfinity: false }),
    Min(least),
    Max(1e9),
  ];
  return (target, key) => parts.forEach((part) => part(target, key));
}

function SpeciesName(description: string): PropertyDecorator {
  const parts = [ApiProperty({ required: false, description }), Omittable(), Tidy(), IsString(), Length(1, 40)];
  return (target, key) => parts.forEach((part) => part(target, key));
}

export class IdentificationQueryDto implements IdentificationQuery {
  @SpeciesName('as in "Na I"; "unidentified" for what was decided to be in no list')
  species?: string;

  @ApiProperty({ required: false, enum: FAMILIES })
  @Omittable()
  @IsIn(FAMILIES)
  family?: string;

  @ApiProperty({ required: false, enum: REVIEW_STATES, default: 'accepted' })
  @Omittable()
  @IsIn(REVIEW_STATES)
  state?: ReviewState;

  @ApiProperty({ required: false, format: 'uuid' })
  @Omittable()
  @IsUUID()
  programmeId?: string;

  @Bound('measured wavelength from, vacuum nm', 0)
  fromNm?: number;
  @Bound('measured wavelength to, vacuum nm', 0)
  toNm?: number;

  @Bound('velocity from, km/s', -1e6)
  fromKmPerS?: number;
  @Bound('velocity to, km/s', -1e6)
  toKmPerS?: number;

  @Bound('equivalent width from, nm, positive in absorption', -1e6)
  fromWidthNm?: number;
  @Bound('equivalent width to, nm', -1e6)
  toWidthNm?: number;

  @SpeciesName('the target has an accepted line of this species at about the same velocity')
  withSpecies?: string;
  @SpeciesName('the target has no accepted line of this species at about the same velocity')
  withoutSpecies?: string;

  @Bound('how near a companion has to be, km/s; 5 when left out', 0)
  companionKmPerS?: number;

  @ApiProperty({ required: false, enum: SEARCH_ORDERS, default: 'wavelength' })
  @Omittable()
  @IsIn(SEARCH_ORDERS)
  order?: SearchOrder;
}

export class SearchPageDto extends IdentificationQueryDto {
  @ApiProperty({ required: false, description: '`next` of the page before' })
  @Omittable()
  @IsString()
  @MaxLength(200)
  after?: string;

  @ApiProperty({ required: false, minimum: 1, maximum: 500, default: 100 })
  @Omittable()
  @Type(() => Number)
  @IsInt()
  @Min(1)
  @Max(500)
  limit?: number;
}

export class SavedSearchDto {
  @ApiProperty({ minLength: 1, maxLength: 120 })
  @Tidy()
  @IsString()
  @Length(1, 120)
  name: string;

  @ApiProperty({ type: IdentificationQueryDto })
  @IsObject()
  @ValidateNested()
  @Type(() => IdentificationQueryDto)
  query: IdentificationQueryDto;
}
