import { Body, Controller, Delete, HttpCode, Param, Post } from '@nestjs/common';
import { ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import type { RigStatus } from '@cresthold/shared';
import { NeedsReauthentication, Roles } from '../auth/access.decorator.js';
import { CurrentUser, type SignedInUser } from '../auth/signed-in-user.js';
import { rigStatusDtoSchema } from '../rigs/dto/rig.dto.js';
import { bypassSchema, type BypassOrder } from './dto/interlock.dto.js';
import { InterlocksService } from './interlocks.service.js';

/** Bypassing and acknowledging the interlocks in force. Each answers with the rig's status as it follows. */
@ApiTags('interlocks')
@Controller('rigs/:rigId/interlocks/:interlock')
export class InterlocksController {
  constructor(private readonly interlocks: InterlocksService) {}

  @Post('bypass')
  @HttpCode(200)
  @Roles('safety-officer')
  @NeedsReauthentication()
  @ApiOperation({
    summary: 'Lets an interlock not act for a time, where the envelope allows it.',
    description: 'It is judged and shown all the same, and acts at once at the end where it still must.',
  })
  @ApiOkResponse({ standardSchema: rigStatusDtoSchema })
  bypass(
    @Param('rigId') rigId: string,
    @Param('interlock') interlock: string,
    @Body({ schema: bypassSchema }) body: BypassOrder,
    @CurrentUser() user: SignedInUser,
  ): Promise<RigStatus> {
    return this.interlocks.bypass(rigId, interlock, body, user.account);
  }

  @Delete('bypass')
  @Roles('technician', 'test-engineer', 'safety-officer')
  @ApiOperation({ summary: 'Ends a bypass early.' })
  @ApiOkResponse({ standardSchema: rigStatusDtoSchema })
  endBypass(
    @Param('rigId') rigId: string,
    @Param('interlock') interlock: string,
    @CurrentUser() user: SignedInUser,
  ): Promise<RigStatus> {
    return this.interlocks.endBypass(rigId, interlock, user.account);
  }

  @Post('acknowledge')
  @HttpCode(200)
  @Roles('technician', 'test-engineer', 'safety-officer')
  @ApiOperation({ summary: 'Clears a latched interlock whose condition is false again.' })
  @ApiOkResponse({ standardSchema: rigStatusDtoSchema })
  acknowledge(
    @Param('rigId') rigId: string,
    @Param('interlock') interlock: string,
    @CurrentUser() user: SignedInUser,
  ): Promise<RigStatus> {
    return this.interlocks.acknowledge(rigId, interlock, user.account);
  }
}
