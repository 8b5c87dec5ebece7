import { createParamDecorator, type ExecutionContext } from '@nestjs/common';
import type { TokenScope } from '@foreveil/shared';
import type { Request } from 'express';

/** The person behind a request: signed in with a browser, or a script with one of their access tokens. */
export interface Actor {
  readonly userId: string;
  readonly name: string;
  readonly email: string;
  readonly administrator: boolean;
  /** '' for a script */
  readonly sessionId: string;
  readonly token: { readonly id: string; readonly scope: TokenScope } | null;
}

export const CurrentActor = createParamDecorator(
  (_: unknown, context: ExecutionContext): Actor => context.switchToHttp().getRequest<Request & { user: Actor }>().user,
);
