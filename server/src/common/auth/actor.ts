import { createParamDecorator, type ExecutionContext } from '@nestjs/common';
import type { Request } from 'express';

/** The signed-in person behind a request. */
export interface Actor {
  readonly userId: string;
  readonly name: string;
  readonly email: string;
  readonly sessionId: string;
}

export const CurrentActor = createParamDecorator(
  (_: unknown, context: ExecutionContext): Actor => context.switchToHttp().getRequest<Request & { user: Actor }>().user,
);
