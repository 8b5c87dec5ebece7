import { Inject, Injectable } from '@nestjs/common';
import type { ChangeReadingRecipe, NewReadingRecipe, ReadingRecipe } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { asMember } from '../../common/auth/membership.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import type { Scope } from '../../common/scope.js';
import { KNEX } from '../../database/knex.js';
import type { Trx } from '../../database/transaction.js';
import { addAudit } from '../audit/add-audit.js';
import { deleteRecipe, findRecipes, insertRecipe, lockRecipe, updateRecipe } from './recipes.repository.js';

@Injectable()
export class RecipesService {
  constructor(@Inject(KNEX) private readonly db: Knex) {}

  list(scope: Scope): Promise<ReadingRecipe[]> {
    return findRecipes(this.db, scope);
  }

  async create(actor: Actor, scope: Scope, wanted: NewReadingRecipe): Promise<ReadingRecipe> {
    const id = await asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      const made = await insertRecipe(trx, scope, wanted, actor.userId);
      await this.audit(trx, actor, scope, 'recipe_created', made, { ...wanted });
      return made;
    });
    return this.get(scope, id);
  }

  /** @param version the version that the caller saw */
  async change(actor: Actor, scope: Scope, id: string, version: number, change: ChangeReadingRecipe): Promise<ReadingRecipe> {
    await asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      const before = await this.locked(trx, scope, id, version);
      await updateRecipe(trx, scope, id, change, actor.userId);
      await this.audit(trx, actor, scope, 'recipe_changed', id, { from: before, to: { ...change } });
    });
    return this.get(scope, id);
  }

  /** Spectra that were read by it keep their corrections. */
  async remove(actor: Actor, scope: Scope, id: string, version: number): Promise<void> {
    await asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      const before = await this.locked(trx, scope, id, version);
      await deleteRecipe(trx, scope, id);
      await this.audit(trx, actor, scope, 'recipe_deleted', id, { from: before });
    });
  }

  private async get(scope: Scope, id: string): Promise<ReadingRecipe> {
    const [recipe] = await findRecipes(this.db, scope, id);
    if (!recipe) throw notFound();
    return recipe;
  }

  private async locked(trx: Trx, scope: Scope, id: string, version: number): Promise<ReadingRecipe> {
    const now = await lockRecipe(trx, scope, id);
    if (now === null) throw notFound();
    const [recipe] = await findRecipes(trx, scope, id);
    if (now !== version) throw new DomainError('stale_version', 'A teammate changed this recipe.', { current: recipe });
    return recipe!;
  }

  private audit(trx: Trx, { userId }: Actor, scope: Scope, action: string, subject: string, facts: Record<string, unknown>) {
    return addAudit(trx, { ...scope, userId, action, subject, facts });
  }
}
