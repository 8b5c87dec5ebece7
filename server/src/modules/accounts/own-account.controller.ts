import { Body, Controller, Delete, Get, HttpCode, Patch, Post, Put, UseGuards } from '@nestjs/common';
import { ApiOperation, ApiTags } from '@nestjs/swagger';
import type { Account, MailChoices, RecoveryCodes, SecondFactorOffer, Session } from '@foreveil/shared';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsSession } from '../../common/auth/rules.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { ChangeEmailDto, ChangePasswordDto, CodeDto, MailChoiceDto, PasswordDto, PersonNameDto } from './dto/accounts.dto.js';
import { OwnAccountService } from './own-account.service.js';
import { SecondFactorService } from './second-factor/second-factor.service.js';
import { SignInThrottleGuard } from './sign-in-throttle.guard.js';

@ApiTags('account')
@Controller('account')
export class OwnAccountController {
  constructor(
    private readonly account: OwnAccountService,
    private readonly secondFactor: SecondFactorService,
  ) {}

  @Get()
  @NeedsSession()
  @ApiOperation({ summary: 'The own account' })
  get(@CurrentActor() actor: Actor): Promise<Account> {
    return this.account.get(actor);
  }

  @Patch()
  @NeedsSession()
  @ApiOperation({ summary: 'Change the own name' })
  rename(@CurrentActor() actor: Actor, @Body() { name }: PersonNameDto): Promise<Account> {
    return this.account.rename(actor, name);
  }

  @Post('password')
  @HttpCode(204)
  @NeedsSession()
  @UseGuards(SignInThrottleGuard)
  @ApiOperation({ summary: 'Change the password; every other session ends' })
  changePassword(@CurrentActor() actor: Actor, @Body() dto: ChangePasswordDto): Promise<void> {
    return this.account.changePassword(actor, dto);
  }

  @Post('email')
  @HttpCode(202)
  @NeedsSession()
  @UseGuards(SignInThrottleGuard)
  @ApiOperation({ summary: 'Ask for another e-mail address; it changes when the link sent there is followed' })
  askEmailChange(@CurrentActor() actor: Actor, @Body() { email, password }: ChangeEmailDto): Promise<void> {
    return this.account.askEmailChange(actor, email, password);
  }

  @Get('sessions')
  @NeedsSession()
  @ApiOperation({ summary: 'Where one is signed in' })
  sessions(@CurrentActor() actor: Actor): Promise<Session[]> {
    return this.account.sessions(actor);
  }

  @Delete('sessions')
  @HttpCode(204)
  @NeedsSession()
  @ApiOperation({ summary: 'End all sessions but this one' })
  endOtherSessions(@CurrentActor() actor: Actor): Promise<void> {
    return this.account.endOtherSessions(actor);
  }

  @Delete('sessions/:sessionId')
  @HttpCode(204)
  @NeedsSession()
  @ApiOperation({ summary: 'End one session' })
  endSession(@CurrentActor() actor: Actor, @UuidParam('sessionId') sessionId: string): Promise<void> {
    return this.account.endSession(actor, sessionId);
  }

  @Post('second-factor')
  @NeedsSession()
  @UseGuards(SignInThrottleGuard)
  @ApiOperation({ summary: 'Begin with a second factor: what the authenticator app needs' })
  async offerSecondFactor(@CurrentActor() actor: Actor, @Body() { password }: PasswordDto): Promise<SecondFactorOffer> {
    await this.account.confirmed(actor, password);
    return this.secondFactor.offer(actor);
  }

  @Post('second-factor/confirm')
  @HttpCode(200)
  @NeedsSession()
  @UseGuards(SignInThrottleGuard)
  @ApiOperation({ summary: 'Turn the second factor on with a first code; the answer holds the recovery codes' })
  confirmSecondFactor(@CurrentActor() actor: Actor, @Body() { code }: CodeDto): Promise<RecoveryCodes> {
    return this.secondFactor.confirm(actor, code);
  }

  @Post('second-factor/recovery-codes')
  @HttpCode(200)
  @NeedsSession()
  @UseGuards(SignInThrottleGuard)
  @ApiOperation({ summary: 'New recovery codes; the old ones stop working' })
  async renewRecoveryCodes(@CurrentActor() actor: Actor, @Body() { password }: PasswordDto): Promise<RecoveryCodes> {
    await this.account.confirmed(actor, password);
    return this.secondFactor.renewCodes(actor);
  }

  @Post('second-factor/end')
  @HttpCode(204)
  @NeedsSession()
  @UseGuards(SignInThrottleGuard)
  @ApiOperation({ summary: 'Turn the second factor off' })
  async endSecondFactor(@CurrentActor() actor: Actor, @Body() { password }: PasswordDto): Promise<void> {
    await this.account.confirmed(actor, password);
    await this.secondFactor.end(actor);
  }

  @Get('mail-choices')
  @NeedsSession()
  @ApiOperation({ summary: 'Which mail comes at once, once a day, or never' })
  mailChoices(@CurrentActor() actor: Actor): Promise<MailChoices> {
    return this.account.mailChoices(actor);
  }

  @Put('mail-choices')
  @NeedsSession()
  @ApiOperation({ summary: 'Choose for one kind of mail' })
  chooseMail(@CurrentActor() actor: Actor, @Body() dto: MailChoiceDto): Promise<MailChoices> {
    return this.account.chooseMail(actor, dto);
  }
}
