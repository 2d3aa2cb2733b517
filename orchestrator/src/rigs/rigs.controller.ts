import { Body, Controller, Get, HttpCode, Param, Post, Put, Query, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import type { Rig } from '@cresthold/shared';
import type { Response } from 'express';
import { Roles } from '../auth/access.decorator.js';
import { VisibleRigs, type RigScope } from '../auth/rig-scope.js';
import { CurrentUser, type SignedInUser } from '../auth/signed-in-user.js';
import { ApiIfMatch, IfMatch, setEtag } from '../documents/etag.js';
import { setLocation } from '../http/set-location.js';
import { pageQuerySchema, type Page, type PageQuery } from '../paging/page.js';
import { rigDocumentSchema, rigInputSchema, rigPageSchema, type RigDocument } from './dto/rig.dto.js';
import { rigDraftSchema, scanBudgetSchema, type RigDraft, type ScanBudget } from './dto/scan-budget.dto.js';
import { RigsService } from './rigs.service.js';

@ApiTags('rigs')
@Controller('rigs')
export class RigsController {
  constructor(private readonly rigs: RigsService) {}

  @Get()
  @Roles('signed-in')
  @ApiOperation({ summary: 'Lists rigs with their status.' })
  @ApiOkResponse({ standardSchema: rigPageSchema })
  list(
    @Query({ schema: pageQuerySchema }) query: PageQuery,
    @VisibleRigs() visible: RigScope,
  ): Promise<Page<RigDocument>> {
    return this.rigs.list(query, visible);
  }

  @Get(':rigId')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Reads a rig and its status; answers an ETag.' })
  @ApiOkResponse({ standardSchema: rigDocumentSchema })
  async get(
    @Param('rigId') rigId: string,
    @Res({ passthrough: true }) response: Response,
  ): Promise<RigDocument> {
    const rig = await this.rigs.get(rigId);
    setEtag(response, rig.revision);
    return rig;
  }

  @Post()
  @Roles('test-engineer', 'administrator')
  @ApiOperation({ summary: 'Makes a rig.' })
  @ApiCreatedResponse({ standardSchema: rigDocumentSchema })
  async create(
    @Body({ schema: rigInputSchema }) body: Rig,
    @CurrentUser() by: SignedInUser,
    @Res({ passthrough: true }) response: Response,
  ): Promise<RigDocument> {
    const rig = await this.rigs.create(body, by.account);
    setLocation(response, `rigs/${rig.id}`);
    setEtag(response, rig.revision);
    return rig;
  }

  @Post('scan-budget')
  @HttpCode(200)
  @Roles('signed-in')
  @ApiOperation({
    summary:
      'Judges a draft of a rig, finished or not: what its scan would cost, and its faults; saves nothing.',
  })
  @ApiOkResponse({ standardSchema: scanBudgetSchema })
  scanBudget(@Body({ schema: rigDraftSchema }) draft: RigDraft): ScanBudget {
    return this.rigs.budget(draft);
  }

  @Put(':rigId')
  @Roles('test-engineer', 'administrator')
  @ApiIfMatch()
  @ApiOperation({ summary: 'Changes the wiring of a rig; only while it is idle, offline or tripped.' })
  @ApiOkResponse({ standardSchema: rigDocumentSchema })
  async change(
    @Param('rigId') rigId: string,
    @IfMatch() revision: number,
    @Body({ schema: rigInputSchema }) body: Rig,
    @CurrentUser() by: SignedInUser,
    @Res({ passthrough: true }) response: Response,
  ): Promise<RigDocument> {
    const rig = await this.rigs.change(rigId, revision, body, by.account);
    setEtag(response, rig.revision);
    return rig;
  }
}
