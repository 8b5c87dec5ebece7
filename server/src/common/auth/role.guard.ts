import { Inject, Injectable, type CanActivate, type ExecutionContext } from '@nestjs/common';
import { Reflector } from '@nestjs/core';
import type { Request } from 'express';
import type { Knex } from 'knex';
import { KNEX } from '../../database/knex.js';
import { DomainError, notFound } from '../errors/domain-error.js';
import type { Actor } from './actor.js';
import { checkRole } from './membership.js';
import { RULE, type Rule } from './rules.js';

const READING = new Set(['GET', 'HEAD']);

/** Lets pass whom the rule of the route names. A route that names no rule lets nobody pass. */
@Injectable()
export class RoleGuard implements CanActivate {
  constructor(
    private readonly reflector: Reflector,
    @Inject(KNEX) private readonly db: Knex,
  ) {}

  async canActivate(context: ExecutionContext): Promise<boolean> {
    const rule = this.reflector.get<Rule | undefined>(RULE, context.getHandler());
    if (!rule) throw new Error(`no rule on ${context.getClass().name}.${context.getHandler().name}`);
    if (rule.who === 'anyone') return true;
    const { params, user, method } = context.switchToHttp().getRequest<Request & { user: Actor }>();
    checkToken(user, rule, method);
    if (rule.who === 'administrator' && !user.administrator)
      throw new DomainError('needs_administrator', 'This is for administrators of the site.');
    if (rule.who !== 'member') return true;
    const programmeId = params['programmeId'];
    if (typeof programmeId !== 'string') throw notFound();
    await checkRole(this.db, user.userId, programmeId, rule.least, rule.staged);
    return true;
  }
}

/** A token does its person's work in programmes, as far as its scope goes; it never manages the account or the site. */
function checkToken({ token }: Actor, rule: Rule, method: string): void {
  if (!token) return;
  if (rule.who === 'session' || rule.who === 'administrator') throw new DomainError('needs_session', 'Access tokens cannot do this.');
  if (token.scope === 'read' && !READING.has(method)) throw new DomainError('token_scope', 'This access token may only read.');
}
