import { Body, Controller, Get, Post } from '@nestjs/common';
import { ApiOperation, ApiTags } from '@nestjs/swagger';
import type { Programme, ProgrammeSummary } from '@foreveil/shared';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsRole, NeedsSignIn } from '../../common/auth/rules.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { NewProgrammeDto } from './dto/new-programme.dto.js';
import { ProgrammesService } from './programmes.service.js';

@ApiTags('programmes')
@Controller('programmes')
export class ProgrammesController {
  constructor(private readonly programmes: ProgrammesService) {}

  @Get()
  @NeedsSignIn()
  @ApiOperation({ summary: 'Programmes of the signed-in person' })
  list(@CurrentActor() actor: Actor): Promise<ProgrammeSummary[]> {
    return this.programmes.list(actor);
  }

  @Post()
  @NeedsSignIn()
  @ApiOperation({ summary: 'Start a programme and lead it' })
  create(@CurrentActor() actor: Actor, @Body() dto: NewProgrammeDto): Promise<Programme> {
    return this.programmes.create(actor, dto);
  }

  @Get(':programmeId')
  @NeedsRole('reader')
  @ApiOperation({ summary: 'A programme with its members' })
  get(@CurrentActor() actor: Actor, @UuidParam('programmeId') programmeId: string): Promise<Programme> {
    return this.programmes.get(actor, programmeId);
  }
}
