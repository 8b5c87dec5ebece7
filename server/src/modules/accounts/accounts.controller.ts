import { Body, Controller, Get, HttpCode, Inject, Post, Res, UseGuards } from '@nestjs/common';
import { ApiOperation, ApiTags } from '@nestjs/swagger';
import type { Me } from '@foreveil/shared';
import type { Response } from 'express';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsSignIn, Public } from '../../common/auth/rules.js';
import { cookieName, cookieOptions } from '../../common/auth/session-token.js';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { AccountsService } from './accounts.service.js';
import { SignInDto } from './dto/sign-in.dto.js';
import { SignInThrottleGuard } from './sign-in-throttle.guard.js';

@ApiTags('accounts')
@Controller('auth')
export class AccountsController {
  constructor(
    private readonly accounts: AccountsService,
    @Inject(CONFIG) private readonly config: Config,
  ) {}

  @Post('sign-in')
  @HttpCode(200)
  @Public()
  @UseGuards(SignInThrottleGuard)
  @ApiOperation({ summary: 'Sign in; the answer sets the session cookie' })
  async signIn(@Body() dto: SignInDto, @Res({ passthrough: true }) response: Response): Promise<Me> {
    const { token, me } = await this.accounts.signIn(dto);
    const maxAge = this.config.sessionHours * 3_600_000;
    response.cookie(cookieName(this.config), token, { ...cookieOptions(this.config), maxAge });
    return me;
  }

  @Post('sign-out')
  @HttpCode(204)
  @NeedsSignIn()
  @ApiOperation({ summary: 'Sign out: the session ends at once, on every page' })
  async signOut(@CurrentActor() actor: Actor, @Res({ passthrough: true }) response: Response): Promise<void> {
    await this.accounts.signOut(actor);
    response.clearCookie(cookieName(this.config), cookieOptions(this.config));
  }

  @Get('me')
  @NeedsSignIn()
  @ApiOperation({ summary: 'The signed-in person' })
  me(@CurrentActor() { userId, email, name }: Actor): Me {
    return { id: userId, email, name };
  }
}
