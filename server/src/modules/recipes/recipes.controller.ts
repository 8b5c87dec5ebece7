import { Body, Controller, Delete, Get, HttpCode, Patch, Post, UseInterceptors } from '@nestjs/common';
import { ApiHeader, ApiOperation, ApiTags } from '@nestjs/swagger';
import type { ReadingRecipe } from '@foreveil/shared';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsRole } from '../../common/auth/rules.js';
import { IfMatch } from '../../common/http/if-match.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { VersionEtag } from '../../common/http/version-etag.js';
import { ChangeRecipeDto, NewRecipeDto } from './dto/recipe.dto.js';
import { RecipesService } from './recipes.service.js';

const IF_MATCH = { name: 'If-Match', required: true, description: 'the version that was seen, as in "3"' };

@ApiTags('reading recipes')
@Controller('programmes/:programmeId/recipes')
export class RecipesController {
  constructor(private readonly recipes: RecipesService) {}

  @Get()
  @NeedsRole('reader')
  @ApiOperation({ summary: 'Reading recipes of a programme by name' })
  list(@UuidParam('programmeId') programmeId: string): Promise<ReadingRecipe[]> {
    return this.recipes.list({ programmeId });
  }

  @Post()
  @NeedsRole('analyst')
  @UseInterceptors(VersionEtag)
  @ApiOperation({ summary: 'Keep corrections as a recipe for files of one kind' })
  create(@CurrentActor() actor: Actor, @UuidParam('programmeId') programmeId: string, @Body() dto: NewRecipeDto): Promise<ReadingRecipe> {
    return this.recipes.create(actor, { programmeId }, dto);
  }

  @Patch(':recipeId')
  @NeedsRole('analyst')
  @UseInterceptors(VersionEtag)
  @ApiHeader(IF_MATCH)
  @ApiOperation({ summary: 'Rename a recipe, or replace what it corrects' })
  change(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('recipeId') id: string,
    @IfMatch() version: number,
    @Body() dto: ChangeRecipeDto,
  ): Promise<ReadingRecipe> {
    return this.recipes.change(actor, { programmeId }, id, version, dto);
  }

  @Delete(':recipeId')
  @HttpCode(204)
  @NeedsRole('analyst')
  @ApiHeader(IF_MATCH)
  @ApiOperation({ summary: 'Delete a recipe; spectra that were read by it stay as they are' })
  remove(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('recipeId') id: string,
    @IfMatch() version: number,
  ): Promise<void> {
    return this.recipes.remove(actor, { programmeId }, id, version);
  }
}
