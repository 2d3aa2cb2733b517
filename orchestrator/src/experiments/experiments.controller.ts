import { Body, Controller, Get, HttpCode, Param, Post, Query, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import { Roles } from '../auth/access.decorator.js';
import { VisibleRigs, type RigScope } from '../auth/rig-scope.js';
import { CurrentUser, type SignedInUser } from '../auth/signed-in-user.js';
import { setLocation } from '../http/set-location.js';
import { pageQuerySchema, type Page, type PageQuery } from '../paging/page.js';
import {
  createExperimentSchema,
  createVersionSchema,
  experimentPageSchema,
  experimentQuerySchema,
  experimentSchema,
  experimentVersionPageSchema,
  experimentVersionSchema,
  preflightReportSchema,
  preflightRequestSchema,
  versionNumberSchema,
  type CreateExperiment,
  type CreateVersion,
  type Experiment,
  type ExperimentQuery,
  type ExperimentVersion,
  type PreflightReport,
  type PreflightRequest,
} from './dto/experiment.dto.js';
import { ExperimentsService } from './experiments.service.js';
import { PreflightService } from './preflight.service.js';

@ApiTags('experiments')
@Controller('experiments')
export class ExperimentsController {
  constructor(
    private readonly experiments: ExperimentsService,
    private readonly preflights: PreflightService,
  ) {}

  @Get()
  @Roles('signed-in')
  @ApiOperation({ summary: 'Lists experiments, of one rig or of all.' })
  @ApiOkResponse({ standardSchema: experimentPageSchema })
  list(
    @Query({ schema: experimentQuerySchema }) query: ExperimentQuery,
    @VisibleRigs() visible: RigScope,
  ): Promise<Page<Experiment>> {
    return this.experiments.list(query, visible);
  }

  @Post()
  @Roles('test-engineer')
  @ApiOperation({ summary: 'Makes an experiment with its version 1.' })
  @ApiCreatedResponse({ standardSchema: experimentSchema })
  async create(
    @Body({ schema: createExperimentSchema }) body: CreateExperiment,
    @CurrentUser() by: SignedInUser,
    @Res({ passthrough: true }) response: Response,
  ): Promise<Experiment> {
    const experiment = await this.experiments.create(body, by.account);
    setLocation(response, `experiments/${experiment.id}`);
    return experiment;
  }

  @Post('preflight')
  @HttpCode(200)
  @Roles('signed-in')
  @ApiOperation({
    summary: 'Lists the faults of an experiment against the envelope in force; keeps nothing.',
  })
  @ApiOkResponse({ standardSchema: preflightReportSchema })
  async preflight(
    @Body({ schema: preflightRequestSchema }) { rigId, content }: PreflightRequest,
  ): Promise<PreflightReport> {
    return { faults: await this.preflights.check(rigId, content) };
  }

  @Get(':id')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Reads what an experiment is, without its versions.' })
  @ApiOkResponse({ standardSchema: experimentSchema })
  get(@Param('id') id: string): Promise<Experiment> {
    return this.experiments.get(id);
  }

  @Get(':id/versions')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Lists the versions of an experiment, newest first.' })
  @ApiOkResponse({ standardSchema: experimentVersionPageSchema })
  listVersions(
    @Param('id') id: string,
    @Query({ schema: pageQuerySchema }) query: PageQuery,
  ): Promise<Page<ExperimentVersion>> {
    return this.experiments.listVersions(id, query);
  }

  @Get(':id/versions/:version')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Reads one version.' })
  @ApiOkResponse({ standardSchema: experimentVersionSchema })
  getVersion(
    @Param('id') id: string,
    @Param('version', { schema: versionNumberSchema }) version: number,
  ): Promise<ExperimentVersion> {
    return this.experiments.getVersion(id, version);
  }

  @Post(':id/versions')
  @Roles('test-engineer')
  @ApiOperation({ summary: 'Adds an immutable version on top of the latest.' })
  @ApiCreatedResponse({ standardSchema: experimentVersionSchema })
  async createVersion(
    @Param('id') id: string,
    @Body({ schema: createVersionSchema }) body: CreateVersion,
    @CurrentUser() by: SignedInUser,
    @Res({ passthrough: true }) response: Response,
  ): Promise<ExperimentVersion> {
    const version = await this.experiments.createVersion(id, body, by.account);
    setLocation(response, `experiments/${id}/versions/${version.version}`);
    return version;
  }
}
