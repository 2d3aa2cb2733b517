import { Controller, Get, Param, Query } from '@nestjs/common';
import { ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import { Roles } from '../auth/access.decorator.js';
import type { Page } from '../paging/page.js';
import {
  runTracePageSchema,
  scanOfRunSchema,
  scanTracesSchema,
  traceChannelsSchema,
  tracesQuerySchema,
  type RunTrace,
  type ScanOfRun,
  type ScanTraces,
  type TraceChannelDto,
  type TracesRequest,
} from './dto/run-trace.dto.js';
import { RunTraces } from './run-traces.service.js';

/** The arrays of a run, while it goes on and after. */
@ApiTags('runs')
@Controller('runs/:id')
export class RunTracesController {
  constructor(private readonly traces: RunTraces) {}

  @Get('trace-channels')
  @Roles('signed-in')
  @ApiOperation({ summary: 'List the channels whose traces a run records, with their axes.' })
  @ApiOkResponse({ standardSchema: traceChannelsSchema })
  channels(@Param('id') id: string): Promise<TraceChannelDto[]> {
    return this.traces.channels(id);
  }

  @Get('traces')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Read the traces of a channel, in the order of their scans.' })
  @ApiOkResponse({ standardSchema: runTracePageSchema })
  list(
    @Param('id') id: string,
    @Query({ schema: tracesQuerySchema }) query: TracesRequest,
  ): Promise<Page<RunTrace>> {
    return this.traces.list(id, query);
  }

  @Get('traces/:scan')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Read all traces of one scan.' })
  @ApiOkResponse({ standardSchema: scanTracesSchema })
  ofScan(@Param({ schema: scanOfRunSchema }) { id, scan }: ScanOfRun): Promise<ScanTraces> {
    return this.traces.ofScan(id, scan);
  }
}
