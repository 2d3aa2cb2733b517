import { Body, Controller, Get, Param, Post, Put, Query, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import { Roles } from '../auth/access.decorator.js';
import { VisibleRigs, type RigScope } from '../auth/rig-scope.js';
import { CurrentUser, type SignedInUser } from '../auth/signed-in-user.js';
import { ApiIfMatch, IfMatch, setEtag } from '../documents/etag.js';
import { setLocation } from '../http/set-location.js';
import type { Page } from '../paging/page.js';
import {
  changeObjectiveSchema,
  createObjectiveSchema,
  objectivePageSchema,
  objectiveQuerySchema,
  objectiveSchema,
  type ChangeObjective,
  type CreateObjective,
  type Objective,
  type ObjectiveQuery,
} from './dto/objective.dto.js';
import { ObjectivesService } from './objectives.service.js';

@ApiTags('objectives')
@Controller('objectives')
export class ObjectivesController {
  constructor(private readonly objectives: ObjectivesService) {}

  @Get()
  @Roles('signed-in')
  @ApiOperation({ summary: 'Lists objectives, of one rig or of all.' })
  @ApiOkResponse({ standardSchema: objectivePageSchema })
  list(
    @Query({ schema: objectiveQuerySchema }) query: ObjectiveQuery,
    @VisibleRigs() visible: RigScope,
  ): Promise<Page<Objective>> {
    return this.objectives.list(query, visible);
  }

  @Get(':id')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Reads an objective; answers an ETag.' })
  @ApiOkResponse({ standardSchema: objectiveSchema })
  async get(@Param('id') id: string, @Res({ passthrough: true }) response: Response): Promise<Objective> {
    const objective = await this.objectives.get(id);
    setEtag(response, objective.revision);
    return objective;
  }

  @Post()
  @Roles('test-engineer')
  @ApiOperation({ summary: 'Writes an objective.' })
  @ApiCreatedResponse({ standardSchema: objectiveSchema })
  async create(
    @Body({ schema: createObjectiveSchema }) body: CreateObjective,
    @CurrentUser() by: SignedInUser,
    @Res({ passthrough: true }) response: Response,
  ): Promise<Objective> {
    const objective = await this.objectives.create(body, by.account);
    setLocation(response, `objectives/${objective.id}`);
    setEtag(response, objective.revision);
    return objective;
  }

  @Put(':id')
  @Roles('test-engineer')
  @ApiIfMatch()
  @ApiOperation({ summary: 'Changes an objective.' })
  @ApiOkResponse({ standardSchema: objectiveSchema })
  async change(
    @Param('id') id: string,
    @IfMatch() revision: number,
    @Body({ schema: changeObjectiveSchema }) body: ChangeObjective,
    @CurrentUser() by: SignedInUser,
    @Res({ passthrough: true }) response: Response,
  ): Promise<Objective> {
    const objective = await this.objectives.change(id, revision, body.content, by.account);
    setEtag(response, objective.revision);
    return objective;
  }
}
