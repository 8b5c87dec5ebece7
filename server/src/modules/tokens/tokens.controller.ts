import { Body, Controller, Delete, Get, HttpCode, Post } from '@nestjs/common';
import { ApiOperation, ApiTags } from '@nestjs/swagger';
import type { AccessToken, MadeAccessToken } from '@foreveil/shared';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsSession } from '../../common/auth/rules.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { NewTokenDto } from './new-token.dto.js';
import { TokensService } from './tokens.service.js';

@ApiTags('account')
@Controller('account/tokens')
export class TokensController {
  constructor(private readonly tokens: TokensService) {}

  @Get()
  @NeedsSession()
  @ApiOperation({ summary: 'Own access tokens, without the tokens themselves' })
  list(@CurrentActor() actor: Actor): Promise<AccessToken[]> {
    return this.tokens.list(actor);
  }

  @Post()
  @NeedsSession()
  @ApiOperation({ summary: 'Make an access token for a script; it is shown in this answer only' })
  make(@CurrentActor() actor: Actor, @Body() dto: NewTokenDto): Promise<MadeAccessToken> {
    return this.tokens.make(actor, dto);
  }

  @Delete(':tokenId')
  @HttpCode(204)
  @NeedsSession()
  @ApiOperation({ summary: 'Revoke an access token; it stops working at once' })
  revoke(@CurrentActor() actor: Actor, @UuidParam('tokenId') tokenId: string): Promise<void> {
    return this.tokens.revoke(actor, tokenId);
  }
}
