import { Controller, Get, Param, Query } from '@nestjs/common';
import { ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import { Roles } from '../auth/access.decorator.js';
import { afterKey, pageQuerySchema, toPage, type Page, type PageQuery } from '../paging/page.js';
import { RigStore } from '../rigs/rig-store.js';
import {
  toTripSummary,
  tripDocumentSchema,
  tripPageSchema,
  type TripDocument,
  type TripSummary,
} from './dto/trip.dto.js';
import { TripHistory } from './trip-history.js';

@ApiTags('rigs')
@Controller('rigs/:rigId/trips')
export class TripsController {
  constructor(
    private readonly history: TripHistory,
    private readonly rigs: RigStore,
  ) {}

  @Get()
  @Roles('signed-in')
  @ApiOperation({ summary: 'Lists the trips of a rig, newest first: first cause, what followed, who reset.' })
  @ApiOkResponse({ standardSchema: tripPageSchema })
  async list(
    @Param('rigId') rigId: string,
    @Query({ schema: pageQuerySchema }) query: PageQuery,
  ): Promise<Page<TripSummary>> {
    await this.rigs.get(rigId);
    const rows = await this.history.list(rigId, query.limit + 1, afterKey(query));
    return toPage(rows, query.limit, ({ id }) => id, toTripSummary);
  }

  @Get(':tripId')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Reads a trip with the trajectory of its stop.' })
  @ApiOkResponse({ standardSchema: tripDocumentSchema })
  async get(@Param('rigId') rigId: string, @Param('tripId') tripId: string): Promise<TripDocument> {
    const row = await this.history.get(rigId, tripId);
    return { ...toTripSummary(row), trajectory: row.trajectory };
  }
}
