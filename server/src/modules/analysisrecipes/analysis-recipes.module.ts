import { Module } from '@nestjs/common';
import { AnalysisRecipesController } from './analysis-recipes.controller.js';
import { AnalysisRecipesService } from './analysis-recipes.service.js';

@Module({ controllers: [AnalysisRecipesController], providers: [AnalysisRecipesService] })
export class AnalysisRecipesModule {}
