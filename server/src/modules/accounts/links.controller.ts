import { Body, Controller, HttpCode, Post, UseGuards } from '@nestjs/common';
import { ApiOperation, ApiTags } from '@nestjs/swagger';
import { Public } from '../../common/auth/rules.js';
import { ClaimDto, EmailDto, NewPasswordDto, SecretDto } from './dto/accounts.dto.js';
import { FirstAdministratorService } from './first-administrator.service.js';
import { LinksService } from './links.service.js';
import { SignInThrottleGuard } from './sign-in-throttle.guard.js';

/** Doors for people who are not signed in: each needs a secret that they were sent, or sends one. */
@ApiTags('accounts')
@Controller()
@UseGuards(SignInThrottleGuard)
export class LinksController {
  constructor(
    private readonly links: LinksService,
    private readonly first: FirstAdministratorService,
  ) {}

  @Post('auth/password-reset')
  @HttpCode(202)
  @Public()
  @ApiOperation({ summary: 'Send a link for a new password; answers alike whether there is such an account' })
  askPasswordReset(@Body() { email }: EmailDto): Promise<void> {
    return this.links.askPasswordReset(email);
  }

  @Post('auth/password-reset/complete')
  @HttpCode(204)
  @Public()
  @ApiOperation({ summary: 'Set a new password with the secret of such a link; all sessions end' })
  resetPassword(@Body() dto: NewPasswordDto): Promise<void> {
    return this.links.resetPassword(dto);
  }

  @Post('auth/email/confirm')
  @HttpCode(204)
  @Public()
  @ApiOperation({ summary: 'Change the e-mail address with the secret that was sent there' })
  confirmEmail(@Body() { secret }: SecretDto): Promise<void> {
    return this.links.confirmEmail(secret);
  }

  @Post('auth/first-administrator')
  @HttpCode(204)
  @Public()
  @ApiOperation({ summary: 'Open the first administrator’s account with the secret that the server printed' })
  claimSite(@Body() dto: ClaimDto): Promise<void> {
    return this.first.claim(dto);
  }

  @Post('mail/stop')
  @HttpCode(204)
  @Public()
  @ApiOperation({ summary: 'Turn off one kind of mail with the secret from its foot' })
  stopMail(@Body() { secret }: SecretDto): Promise<void> {
    return this.links.stopMail(secret);
  }
}
