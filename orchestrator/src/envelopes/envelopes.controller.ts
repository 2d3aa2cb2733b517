import { Body, Controller, Get, HttpCode, Param, Post, Put, Query, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import { NeedsReauthentication, Roles } from '../auth/access.decorator.js';
import { CurrentUser, type SignedInUser } from '../auth/signed-in-user.js';
import { ApiIfMatch, IfMatch, OptionalIfMatch, setEtag } from '../documents/etag.js';
import { setLocation } from '../http/set-location.js';
import { pageQuerySchema, type Page, type PageQuery } from '../paging/page.js';
import {
  decisionSchema,
  envelopeDraftSchema,
  envelopePageSchema,
  envelopeSchema,
  type Decision,
  type Envelope,
  type EnvelopeDraft,
} from './dto/envelope.dto.js';
import { EnvelopeDecisionsService } from './envelope-decisions.service.js';
import { EnvelopeDraftsService } from './envelope-drafts.service.js';

@ApiTags('envelopes')
@Controller()
export class EnvelopesController {
  constructor(
    private readonly drafts: EnvelopeDraftsService,
    private readonly decisions: EnvelopeDecisionsService,
  ) {}

  @Get('rigs/:rigId/envelopes')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Lists the envelopes of a rig, newest first.' })
  @ApiOkResponse({ standardSchema: envelopePageSchema })
  list(
    @Param('rigId') rigId: string,
    @Query({ schema: pageQuerySchema }) query: PageQuery,
  ): Promise<Page<Envelope>> {
    return this.drafts.list(rigId, query);
  }

  @Post('rigs/:rigId/envelopes')
  @Roles('test-engineer', 'safety-officer')
  @ApiOperation({ summary: 'Drafts an envelope.' })
  @ApiCreatedResponse({ standardSchema: envelopeSchema })
  async create(
    @Param('rigId') rigId: string,
    @Body({ schema: envelopeDraftSchema }) body: EnvelopeDraft,
    @CurrentUser() by: SignedInUser,
    @Res({ passthrough: true }) response: Response,
  ): Promise<Envelope> {
    const envelope = await this.drafts.create(rigId, body.content, by.account);
    setLocation(response, `envelopes/${envelope.id}`);
    setEtag(response, envelope.revision);
    return envelope;
  }

  @Get('envelopes/:id')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Reads an envelope; answers an ETag.' })
  @ApiOkResponse({ standardSchema: envelopeSchema })
  async get(@Param('id') id: string, @Res({ passthrough: true }) response: Response): Promise<Envelope> {
    const envelope = await this.drafts.get(id);
    setEtag(response, envelope.revision);
    return envelope;
  }

  @Put('envelopes/:id')
  @Roles('test-engineer', 'safety-officer')
  @ApiIfMatch()
  @ApiOperation({ summary: 'Changes a draft or a returned envelope; its author only.' })
  @ApiOkResponse({ standardSchema: envelopeSchema })
  async change(
    @Param('id') id: string,
    @IfMatch() revision: number,
    @Body({ schema: envelopeDraftSchema }) body: EnvelopeDraft,
    @CurrentUser() by: SignedInUser,
    @Res({ passthrough: true }) response: Response,
  ): Promise<Envelope> {
    const envelope = await this.drafts.change(id, revision, body.content, by.account);
    setEtag(response, envelope.revision);
    return envelope;
  }

  @Post('envelopes/:id/submit')
  @HttpCode(200)
  @Roles('test-engineer', 'safety-officer')
  @ApiOperation({ summary: 'Hands a draft in for approval; its author only.' })
  @ApiOkResponse({ standardSchema: envelopeSchema })
  submit(@Param('id') id: string, @CurrentUser() by: SignedInUser): Promise<Envelope> {
    return this.drafts.submit(id, by.account);
  }

  @Post('envelopes/:id/approve')
  @HttpCode(200)
  @Roles('safety-officer')
  @NeedsReauthentication()
  @ApiIfMatch(false)
  @ApiOperation({ summary: 'Puts a submitted envelope in force; never its author.' })
  @ApiOkResponse({ standardSchema: envelopeSchema })
  approve(
    @Param('id') id: string,
    @OptionalIfMatch() revision: number | null,
    @Body({ schema: decisionSchema }) { reason }: Decision,
    @CurrentUser() by: SignedInUser,
  ): Promise<Envelope> {
    return this.decisions.approve({ id, revision, reason, by: by.account });
  }

  @Post('envelopes/:id/return')
  @HttpCode(200)
  @Roles('safety-officer')
  @ApiIfMatch(false)
  @ApiOperation({ summary: 'Gives a submitted envelope back to its author; never the author.' })
  @ApiOkResponse({ standardSchema: envelopeSchema })
  giveBack(
    @Param('id') id: string,
    @OptionalIfMatch() revision: number | null,
    @Body({ schema: decisionSchema }) { reason }: Decision,
    @CurrentUser() by: SignedInUser,
  ): Promise<Envelope> {
    return this.decisions.giveBack({ id, revision, reason, by: by.account });
  }
}
