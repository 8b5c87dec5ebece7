import { Body, Controller, Delete, Get, HttpCode, Patch, Post, UseInterceptors } from '@nestjs/common';
import { ApiHeader, ApiOperation, ApiTags } from '@nestjs/swagger';
import type { AnalysisRecipe } from '@foreveil/shared';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsRole } from '../../common/auth/rules.js';
import { IfMatch } from '../../common/http/if-match.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { VersionEtag } from '../../common/http/version-etag.js';
import { AnalysisRecipesService } from './analysis-recipes.service.js';
import { ChangeAnalysisRecipeDto, NewAnalysisRecipeDto } from './dto/analysis-recipe.dto.js';

const SEEN = { name: 'If-Match', required: true, description: 'the version that was seen, as in "3"' };

@ApiTags('analysis recipes')
@Controller('programmes/:programmeId/analysis-recipes')
export class AnalysisRecipesController {
  constructor(private readonly recipes: AnalysisRecipesService) {}

  @Get()
  @NeedsRole('reader')
  @ApiOperation({ summary: 'Settings that the programme keeps under a name' })
  list(@UuidParam('programmeId') programmeId: string): Promise<AnalysisRecipe[]> {
    return this.recipes.list({ programmeId });
  }

  @Post()
  @NeedsRole('analyst')
  @UseInterceptors(VersionEtag)
  @ApiOperation({ summary: 'Keep settings under a name' })
  create(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @Body() dto: NewAnalysisRecipeDto,
  ): Promise<AnalysisRecipe> {
    return this.recipes.create(actor, { programmeId }, dto);
  }

  @Patch(':recipeId')
  @NeedsRole('analyst')
  @UseInterceptors(VersionEtag)
  @ApiHeader(SEEN)
  @ApiOperation({ summary: 'Rename a recipe or change its settings; runs made with it keep theirs' })
  change(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('recipeId') id: string,
    @IfMatch() version: number,
    @Body() dto: ChangeAnalysisRecipeDto,
  ): Promise<AnalysisRecipe> {
    return this.recipes.change(actor, { programmeId }, { id, version }, dto);
  }

  @Delete(':recipeId')
  @HttpCode(204)
  @NeedsRole('analyst')
  @ApiHeader(SEEN)
  @ApiOperation({ summary: 'Delete a recipe; runs made with it keep their settings' })
  remove(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('recipeId') id: string,
    @IfMatch() version: number,
  ): Promise<void> {
    return this.recipes.remove(actor, { programmeId }, { id, version });
  }
}
