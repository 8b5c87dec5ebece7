import { Injectable, type ExecutionContext } from '@nestjs/common';
import { Reflector } from '@nestjs/core';
import { AuthGuard } from '@nestjs/passport';
import { DomainError } from '../errors/domain-error.js';
import { RULE, type Rule } from './rules.js';

/** Nobody passes without a session, except where the route says that anyone may. */
@Injectable()
export class SessionGuard extends AuthGuard('jwt') {
  constructor(private readonly reflector: Reflector) {
    super();
  }

  override async canActivate(context: ExecutionContext): Promise<boolean> {
    const rule = this.reflector.get<Rule | undefined>(RULE, context.getHandler());
    if (rule?.who === 'anyone') return true;
    return (await super.canActivate(context)) as boolean;
  }

  override handleRequest<T>(error: unknown, user: T | false): T {
    if (error) throw error;
    if (!user) throw new DomainError('not_signed_in', 'Sign in to do this.');
    return user;
  }
}
