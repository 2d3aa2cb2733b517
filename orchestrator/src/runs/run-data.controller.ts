import { Controller, Get, Param, Query } from '@nestjs/common';
import { ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import type { RunColumn, RunEvent } from '@cresthold/shared';
import { Roles } from '../auth/access.decorator.js';
import type { Samples } from '../recordings/run-file/index.js';
import {
  runColumnsSchema,
  runEventsQuerySchema,
  runEventsSchema,
  samplesQuerySchema,
  samplesSchema,
  type RunEventsQuery,
  type SamplesRequest,
} from './dto/run.dto.js';
import { RunsService } from './runs.service.js';

/** What a run recorded, while it goes on and after. */
@ApiTags('runs')
@Controller('runs/:id')
export class RunDataController {
  constructor(private readonly runs: RunsService) {}

  @Get('columns')
  @Roles('signed-in')
  @ApiOperation({ summary: 'List the columns of the samples of a run.' })
  @ApiOkResponse({ standardSchema: runColumnsSchema })
  columns(@Param('id') id: string): Promise<RunColumn[]> {
    return this.runs.columns(id);
  }

  @Get('samples')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Read samples over a span at a given resolution.' })
  @ApiOkResponse({ standardSchema: samplesSchema })
  samples(
    @Param('id') id: string,
    @Query({ schema: samplesQuerySchema }) query: SamplesRequest,
  ): Promise<Samples> {
    return this.runs.samples(id, query);
  }

  @Get('events')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Read the events of a run in their order.' })
  @ApiOkResponse({ standardSchema: runEventsSchema })
  events(
    @Param('id') id: string,
    @Query({ schema: runEventsQuerySchema }) { afterSequence }: RunEventsQuery,
  ): Promise<RunEvent[]> {
    return this.runs.events(id, afterSequence);
  }
}
