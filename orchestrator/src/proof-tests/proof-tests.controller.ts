import { Body, Controller, Get, HttpCode, Param, Post, Query, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import type { RigStatus } from '@cresthold/shared';
import type { Response } from 'express';
import { NeedsReauthentication, Roles } from '../auth/access.decorator.js';
import { CurrentUser, type SignedInUser } from '../auth/signed-in-user.js';
import { setLocation } from '../http/set-location.js';
import { pageQuerySchema, type Page, type PageQuery } from '../paging/page.js';
import { rigStatusDtoSchema } from '../rigs/dto/rig.dto.js';
import {
  proofTestDueListSchema,
  proofTestPageSchema,
  proofTestSchema,
  proofTestSignatureSchema,
  proofTestStartSchema,
  type ProofTest,
  type ProofTestDue,
  type ProofTestSignature,
  type ProofTestStart,
} from './dto/proof-test.dto.js';
import { ProofTestDues } from './proof-test-dues.service.js';
import { ProofTestsService } from './proof-tests.service.js';

@ApiTags('proof tests')
@Controller('rigs/:rigId/proof-tests')
export class ProofTestsController {
  constructor(
    private readonly tests: ProofTestsService,
    private readonly dues: ProofTestDues,
  ) {}

  @Get()
  @Roles('signed-in')
  @ApiOperation({ summary: 'Lists the proof tests of a rig, newest first.' })
  @ApiOkResponse({ standardSchema: proofTestPageSchema })
  list(
    @Param('rigId') rigId: string,
    @Query({ schema: pageQuerySchema }) query: PageQuery,
  ): Promise<Page<ProofTest>> {
    return this.tests.list(rigId, query);
  }

  @Get('due')
  @Roles('signed-in')
  @ApiOperation({ summary: 'When each interlock in force has to be tested.' })
  @ApiOkResponse({ standardSchema: proofTestDueListSchema })
  due(@Param('rigId') rigId: string): Promise<ProofTestDue[]> {
    return this.dues.list(rigId);
  }

  @Post('arm')
  @HttpCode(200)
  @Roles('test-engineer', 'technician')
  @ApiOperation({
    summary: 'Arms the rig for proof tests, though they are overdue; moves nothing.',
    description: 'No run can be started until they are done.',
  })
  @ApiOkResponse({ standardSchema: rigStatusDtoSchema })
  arm(@Param('rigId') rigId: string, @CurrentUser() user: SignedInUser): Promise<RigStatus> {
    return this.tests.arm(rigId, user.account);
  }

  @Post()
  @Roles('technician', 'test-engineer', 'safety-officer')
  @ApiOperation({
    summary: 'Begins the proof test of an interlock; the rig must be armed and without a run.',
    description:
      'A forced test takes the condition as true at once, and the rig does what follows. The response is measured by the rig host and appears in the test.',
  })
  @ApiCreatedResponse({ standardSchema: proofTestSchema })
  async start(
    @Param('rigId') rigId: string,
    @Body({ schema: proofTestStartSchema }) body: ProofTestStart,
    @CurrentUser() user: SignedInUser,
    @Res({ passthrough: true }) response: Response,
  ): Promise<ProofTest> {
    const test = await this.tests.start(rigId, body, user.account);
    setLocation(response, `rigs/${rigId}/proof-tests/${test.id}`);
    return test;
  }

  @Get(':testId')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Reads a proof test.' })
  @ApiOkResponse({ standardSchema: proofTestSchema })
  get(@Param('rigId') rigId: string, @Param('testId') testId: string): Promise<ProofTest> {
    return this.tests.get(rigId, testId);
  }

  @Post(':testId/sign')
  @HttpCode(200)
  @Roles('technician', 'test-engineer', 'safety-officer')
  @NeedsReauthentication()
  @ApiOperation({ summary: 'Signs a proof test as passed or failed; it cannot be changed afterwards.' })
  @ApiOkResponse({ standardSchema: proofTestSchema })
  sign(
    @Param('rigId') rigId: string,
    @Param('testId') testId: string,
    @Body({ schema: proofTestSignatureSchema }) body: ProofTestSignature,
    @CurrentUser() user: SignedInUser,
  ): Promise<ProofTest> {
    return this.tests.sign(rigId, testId, body, user.account);
  }
}
