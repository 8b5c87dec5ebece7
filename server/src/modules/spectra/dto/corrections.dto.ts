import type {
  AxisUnit,
  FluxKind,
  Frame,
  Medium,
  ObservingTime,
  Pointing,
  ReadingCorrections,
  Site,
  TimeMark,
  TimeScale,
  UncertaintyKind,
} from '@foreveil/shared';
import { Type } from 'class-transformer';
import { IsBoolean, IsIn, IsNumber, IsObject, IsString, Matches, Max, MaxLength, Min, ValidateIf, ValidateNested } from 'class-validator';
import { Omittable } from '../../../common/http/omittable.js';
import { Tidy } from '../../../common/http/tidy.js';

const UNCERTAINTY_KINDS: readonly UncertaintyKind[] = ['sigma', 'variance', 'inverse_variance'];
const MEDIA: readonly Medium[] = ['vacuum', 'air'];
const FLUX_KINDS: readonly FluxKind[] = ['per_wavelength', 'per_frequency', 'normalised', 'counts', 'unknown'];
const FRAMES: readonly Frame[] = ['topocentric', 'geocentric', 'heliocentric', 'barycentric', 'lsrk', 'lsrd', 'source', 'unknown'];
const AXIS_UNITS: readonly AxisUnit[] = [
  ...(['m', 'nm', 'angstrom', 'micron', 'wavenumber_per_cm', 'wavenumber_per_m'] as const),
  ...(['hz', 'ghz', 'thz', 'ev', 'kev', 'velocity'] as const),
];
const TIME_SCALES: readonly TimeScale[] = ['utc', 'tai', 'tt', 'tdb', 'ut1', 'gps', 'unknown'];
const TIME_MARKS: readonly TimeMark[] = ['start', 'mid', 'end', 'unknown'];
const DELIMITERS = [',', ';', '\t', '|', ' '] as const;
const ISO_TIME = /^\d{4}-\d{2}-\d{2}(T\d{2}:\d{2}(:\d{2}(\.\d{1,9})?)?)?$/;
const FINITE = { allowNaN: false, allowInfinity: false };
const NullOrSet = () => ValidateIf((_, value) => value !== undefined && value !== null);

class ObservingTimeDto implements ObservingTime {
  @IsString()
  @Matches(ISO_TIME, { message: 'iso must be a time such as 2031-03-04T05:06:07' })
  iso: string;

  @IsIn(TIME_SCALES)
  scale: TimeScale;

  @IsIn(TIME_MARKS)
  marks: TimeMark;
}

class SiteDto implements Site {
  @IsNumber(FINITE)
  @Min(-90)
  @Max(90)
  latitudeDeg: number;

  @IsNumber(FINITE)
  @Min(-360)
  @Max(360)
  longitudeDegEast: number;

  @IsNumber(FINITE)
  @Min(-500)
  @Max(100_000)
  heightM: number;
}

class PointingDto implements Pointing {
  @IsNumber(FINITE)
  @Min(0)
  @Max(360)
  raDeg: number;

  @IsNumber(FINITE)
  @Min(-90)
  @Max(90)
  decDeg: number;
}

export class CorrectionsDto implements ReadingCorrections {
  @Omittable()
  @IsString()
  @MaxLength(200)
  place?: string;

  @Omittable()
  @IsString()
  @MaxLength(200)
  wavelengthColumn?: string;

  @Omittable()
  @IsString()
  @MaxLength(200)
  fluxColumn?: string;

  @NullOrSet()
  @IsString()
  @MaxLength(200)
  uncertaintyColumn?: string | null;

  @Omittable()
  @IsIn(UNCERTAINTY_KINDS)
  uncertaintyKind?: UncertaintyKind;

  @NullOrSet()
  @IsString()
  @MaxLength(200)
  maskColumn?: string | null;

  @Omittable()
  @IsIn(AXIS_UNITS)
  axisUnit?: AxisUnit;

  @Omittable()
  @IsNumber(FINITE)
  @Min(1)
  @Max(1e9)
  restWavelengthNm?: number;

  @Omittable()
  @IsIn(MEDIA)
  medium?: Medium;

  @Omittable()
  @IsIn(FRAMES)
  frame?: Frame;

  @Omittable()
  @Tidy()
  @IsString()
  @MaxLength(100)
  fluxUnit?: string;

  @Omittable()
  @IsIn(FLUX_KINDS)
  fluxKind?: FluxKind;

  @Omittable()
  @IsNumber(FINITE)
  @Min(1)
  @Max(10_000_000)
  resolvingPower?: number;

  @Omittable()
  @Tidy()
  @IsString()
  @MaxLength(120)
  objectName?: string;

  @Omittable()
  @IsObject()
  @ValidateNested()
  @Type(() => ObservingTimeDto)
  time?: ObservingTimeDto;

  @Omittable()
  @IsNumber(FINITE)
  @Min(0)
  @Max(1e8)
  exposureS?: number;

  @Omittable()
  @IsObject()
  @ValidateNested()
  @Type(() => SiteDto)
  site?: SiteDto;

  @Omittable()
  @IsObject()
  @ValidateNested()
  @Type(() => PointingDto)
  pointing?: PointingDto;

  @Omittable()
  @IsIn(DELIMITERS)
  delimiter?: (typeof DELIMITERS)[number];

  @Omittable()
  @IsBoolean()
  decimalComma?: boolean;
}

/** Checked corrections as plain data: what a thread can be sent and a row can hold. */
export const plainCorrections = (corrections: CorrectionsDto | undefined): ReadingCorrections =>
  JSON.parse(JSON.stringify(corrections ?? {})) as ReadingCorrections;
