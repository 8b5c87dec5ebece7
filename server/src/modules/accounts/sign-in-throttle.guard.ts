import { createHash } from 'node:crypto';
import { Injectable, type ExecutionContext } from '@nestjs/common';
import { ThrottlerGuard, type ThrottlerGetTrackerFunction, type ThrottlerLimitDetail } from '@nestjs/throttler';
import { DomainError } from '../../common/errors/domain-error.js';

/** What an attempt is counted under: the address it comes from, alone and together with the account or the link it is for. */
export const trackAddress: ThrottlerGetTrackerFunction = (request) => String(request['ip']);
export const trackAccount: ThrottlerGetTrackerFunction = (request) => {
  const { email, secret } = (request['body'] ?? {}) as { email?: unknown; secret?: unknown };
  const { userId } = (request['user'] ?? {}) as { userId?: string };
  return createHash('sha256')
    .update(`${String(request['ip'])}\n${String(userId ?? email ?? secret).toLowerCase()}`)
    .digest('hex');
};

/** Slows down guessing: counts attempts at each door for itself, and says after how many seconds to try again. */
@Injectable()
export class SignInThrottleGuard extends ThrottlerGuard {
  protected override throwThrottlingException(_: ExecutionContext, { timeToBlockExpire }: ThrottlerLimitDetail): Promise<void> {
    const seconds = Math.max(1, timeToBlockExpire);
    throw new DomainError('too_many_requests', `Too many attempts. Try again in ${seconds} seconds.`, { retryAfter: seconds });
  }
}
