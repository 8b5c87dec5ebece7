import { Inject, Injectable, type CanActivate, type ExecutionContext } from '@nestjs/common';
import { Reflector } from '@nestjs/core';
import type { Request } from 'express';
import type { Knex } from 'knex';
import { KNEX } from '../../database/knex.js';
import { notFound } from '../errors/domain-error.js';
import type { Actor } from './actor.js';
import { checkRole } from './membership.js';
import { RULE, type Rule } from './rules.js';

/** Lets members with the role that the route names pass. A route that names no rule lets nobody pass. */
@Injectable()
export class RoleGuard implements CanActivate {
  constructor(
    private readonly reflector: Reflector,
    @Inject(KNEX) private readonly db: Knex,
  ) {}

  async canActivate(context: ExecutionContext): Promise<boolean> {
    const rule = this.reflector.get<Rule | undefined>(RULE, context.getHandler());
    if (!rule) throw new Error(`no rule on ${context.getClass().name}.${context.getHandler().name}`);
    if (rule.who !== 'member') return true;
    const { params, user } = context.switchToHttp().getRequest<Request & { user: Actor }>();
    const programmeId = params['programmeId'];
    if (typeof programmeId !== 'string') throw notFound();
    await checkRole(this.db, user.userId, programmeId, rule.least);
    return true;
  }
}
