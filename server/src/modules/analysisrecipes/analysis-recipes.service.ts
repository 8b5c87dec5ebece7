import { Inject, Injectable } from '@nestjs/common';
import type { AnalysisRecipe, AnalysisRecipeChange, NewAnalysisRecipe } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { asMember } from '../../common/auth/membership.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import type { Scope } from '../../common/scope.js';
import { KNEX } from '../../database/knex.js';
import type { Trx } from '../../database/transaction.js';
import { checkSettings } from '../analyses/check-settings.js';
import { addAudit } from '../audit/add-audit.js';
import { sayEvent } from '../events/say-event.js';
import { deleteRecipe, findRecipes, insertRecipe, lockRecipe, updateRecipe } from './analysis-recipes.repository.js';

/** A recipe, and the version of it that the caller saw. */
export interface SeenRecipe {
  readonly id: string;
  readonly version: number;
}

@Injectable()
export class AnalysisRecipesService {
  constructor(@Inject(KNEX) private readonly db: Knex) {}

  list(scope: Scope): Promise<AnalysisRecipe[]> {
    return findRecipes(this.db, scope);
  }

  create(actor: Actor, scope: Scope, wanted: NewAnalysisRecipe): Promise<AnalysisRecipe> {
    checkSettings(wanted.settings);
    return asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      const id = await insertRecipe(trx, scope, { ...wanted, userId: actor.userId });
      await this.tell(trx, actor, scope, 'analysis_recipe_created', id, { ...wanted });
      return this.one(trx, scope, id);
    });
  }

  change(actor: Actor, scope: Scope, seen: SeenRecipe, change: AnalysisRecipeChange): Promise<AnalysisRecipe> {
    if (change.settings) checkSettings(change.settings);
    return asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      await this.hold(trx, scope, seen);
      await updateRecipe(trx, scope, seen.id, { ...change, userId: actor.userId });
      await this.tell(trx, actor, scope, 'analysis_recipe_changed', seen.id, { ...change });
      return this.one(trx, scope, seen.id);
    });
  }

  remove(actor: Actor, scope: Scope, seen: SeenRecipe): Promise<void> {
    return asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      const { name, settings } = await this.hold(trx, scope, seen);
      await deleteRecipe(trx, scope, seen.id);
      await this.tell(trx, actor, scope, 'analysis_recipe_deleted', seen.id, { name, settings });
    });
  }

  /** @throws not_found, stale_version with the recipe as it is now */
  private async hold(trx: Trx, scope: Scope, { id, version }: SeenRecipe): Promise<AnalysisRecipe> {
    const now = await lockRecipe(trx, scope, id);
    if (now === null) throw notFound();
    const current = await this.one(trx, scope, id);
    if (now !== version) throw new DomainError('stale_version', 'A teammate changed this recipe.', { current });
    return current;
  }

  private async one(trx: Trx, scope: Scope, id: string): Promise<AnalysisRecipe> {
    const [recipe] = await findRecipes(trx, scope, id);
    return recipe!;
  }

  private async tell(trx: Trx, actor: Actor, scope: Scope, action: string, subject: string, facts: Record<string, unknown>): Promise<void> {
    await addAudit(trx, { ...scope, userId: actor.userId, action, subject, facts });
    await sayEvent(trx, { kind: 'analysis_recipes', ...scope });
  }
}
