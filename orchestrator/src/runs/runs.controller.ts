import { Body, Controller, Get, HttpCode, Param, Post, Query, Res } from '@nestjs/common';
import { ApiAcceptedResponse, ApiHeader, ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import { Roles } from '../auth/access.decorator.js';
import { VisibleRigs, type RigScope } from '../auth/rig-scope.js';
import { CurrentUser, type SignedInUser } from '../auth/signed-in-user.js';
import { setLocation } from '../http/set-location.js';
import type { Page } from '../paging/page.js';
import { reasonedSchema, type Reasoned } from '../rig-hosts/dto/rig-commands.dto.js';
import {
  runPageSchema,
  runQuerySchema,
  runSchema,
  runStartSchema,
  type Run,
  type RunQuery,
  type RunStart,
} from './dto/run.dto.js';
import { IdempotencyKey } from './idempotency-key.js';
import { RunStarter } from './run-start.service.js';
import { toRun } from './run.mapper.js';
import { RunsService } from './runs.service.js';

@ApiTags('runs')
@Controller('runs')
export class RunsController {
  constructor(
    private readonly runs: RunsService,
    private readonly starter: RunStarter,
  ) {}

  @Get()
  @Roles('signed-in')
  @ApiOperation({ summary: 'List runs, newest first.' })
  @ApiOkResponse({ standardSchema: runPageSchema })
  list(
    @Query({ schema: runQuerySchema }) query: RunQuery,
    @VisibleRigs() visible: RigScope,
  ): Promise<Page<Run>> {
    return this.runs.list(query, visible);
  }

  @Get(':id')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Read a run.' })
  @ApiOkResponse({ standardSchema: runSchema })
  get(@Param('id') id: string): Promise<Run> {
    return this.runs.get(id);
  }

  @Post()
  @HttpCode(202)
  @Roles('test-engineer', 'technician')
  @ApiHeader({ name: 'Idempotency-Key', required: false, description: 'The same key starts one run only.' })
  @ApiOperation({ summary: 'Start a run of an experiment version on its rig, which must be armed.' })
  @ApiAcceptedResponse({ standardSchema: runSchema })
  async start(
    @Body({ schema: runStartSchema }) body: RunStart,
    @IdempotencyKey() key: string | null,
    @CurrentUser() by: SignedInUser,
    @Res({ passthrough: true }) response: Response,
  ): Promise<Run> {
    const run = await this.starter.start(body, key, by.account);
    setLocation(response, `runs/${run.id}`);
    return toRun(run);
  }

  @Post(':id/pause')
  @HttpCode(202)
  @Roles('test-engineer', 'technician')
  @ApiOperation({ summary: 'Hold a run where it is.' })
  @ApiAcceptedResponse({ standardSchema: runSchema })
  pause(
    @Param('id') id: string,
    @Body({ schema: reasonedSchema }) { reason }: Reasoned,
    @CurrentUser() by: SignedInUser,
  ): Promise<Run> {
    return this.runs.pause(id, reason, by.account);
  }

  @Post(':id/resume')
  @HttpCode(202)
  @Roles('test-engineer', 'technician')
  @ApiOperation({ summary: 'Go on with a paused run.' })
  @ApiAcceptedResponse({ standardSchema: runSchema })
  resume(@Param('id') id: string, @CurrentUser() by: SignedInUser): Promise<Run> {
    return this.runs.resume(id, by.account);
  }

  @Post(':id/stop')
  @HttpCode(202)
  @Roles('test-engineer', 'technician')
  @ApiOperation({ summary: 'End a run in order: its rig is brought to rest.' })
  @ApiAcceptedResponse({ standardSchema: runSchema })
  stop(
    @Param('id') id: string,
    @Body({ schema: reasonedSchema }) { reason }: Reasoned,
    @CurrentUser() by: SignedInUser,
  ): Promise<Run> {
    return this.runs.stop(id, reason, by.account);
  }
}
