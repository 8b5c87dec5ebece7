import type { PlaceDecision } from '@foreveil/shared';
import { ApiProperty } from '@nestjs/swagger';
import { IsInt, IsUUID, Max, Min } from 'class-validator';

export class PlaceDecisionDto implements PlaceDecision {
  @ApiProperty({ format: 'uuid', description: "the spectrum's current analysis, as it was seen" })
  @IsUUID()
  analysisId: string;

  @ApiProperty({ minimum: 0, description: 'feature of that analysis' })
  @IsInt()
  @Min(0)
  @Max(1_000_000)
  featureIndex: number;
}
