import { RequestMethod } from '@nestjs/common';
import { METHOD_METADATA, PATH_METADATA } from '@nestjs/common/constants.js';
import { ModulesContainer } from '@nestjs/core';
import { RULE, type Rule } from '../../../server/src/common/auth/rules.js';
import type { Api } from './api.js';

export interface Route {
  readonly method: string;
  /** '/api/programmes/:programmeId' */
  readonly path: string;
  readonly rule: Rule | undefined;
  /** 'ProgrammesController.get' */
  readonly handler: string;
}

type Handlers = Record<string, (...args: never[]) => unknown>;

/** Every route of the running API with its rule, read from the controllers. */
export function routeTable({ app }: Api): Route[] {
  const controllers = [...app.get(ModulesContainer).values()].flatMap((module) => [...module.controllers.values()]);
  return controllers.flatMap(({ metatype }) => {
    const prototype = (metatype as { prototype: Handlers }).prototype;
    const base = Reflect.getMetadata(PATH_METADATA, metatype!) as string;
    return Object.getOwnPropertyNames(prototype).flatMap((name) => {
      const handler = prototype[name]!;
      const method = Reflect.getMetadata(METHOD_METADATA, handler) as RequestMethod | undefined;
      if (method === undefined) return [];
      const path = `/api/${base}/${Reflect.getMetadata(PATH_METADATA, handler) as string}`.replaceAll(/\/+/g, '/').replace(/\/$/, '');
      const rule = Reflect.getMetadata(RULE, handler) as Rule | undefined;
      return [{ method: RequestMethod[method], path, rule, handler: `${metatype!.name}.${name}` }];
    });
  });
}
