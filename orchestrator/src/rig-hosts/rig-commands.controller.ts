import { Body, Controller, Get, HttpCode, Param, Post, Put } from '@nestjs/common';
import { ApiBody, ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import type { RigStatus } from '@cresthold/shared';
import { Emergency, NeedsReauthentication, Roles } from '../auth/access.decorator.js';
import { CurrentUser, type SignedInUser } from '../auth/signed-in-user.js';
import { rigStatusDtoSchema } from '../rigs/dto/rig.dto.js';
import {
  emergencyStopBody,
  faultChangeSchema,
  moveReleaseSchema,
  moveSchema,
  reasonedSchema,
  rigStatusListSchema,
  type FaultChange,
  type Move,
  type MoveRelease,
  type Reasoned,
} from './dto/rig-commands.dto.js';
import { RigCommandsService } from './rig-commands.service.js';
import { StopReason } from './stop-reason.js';

/** What people do to a rig by hand. Each answers with the rig's status as it follows. */
@ApiTags('rigs')
@Controller('rigs')
export class RigCommandsController {
  constructor(private readonly commands: RigCommandsService) {}

  @Post('emergency-stop')
  @HttpCode(200)
  @Roles('signed-in')
  @Emergency()
  @ApiOperation({
    summary: 'Stops every rig at once and latches it. A software stop: no substitute for the hard-wired one.',
  })
  @ApiBody(emergencyStopBody)
  @ApiOkResponse({ standardSchema: rigStatusListSchema })
  emergencyStopAll(@StopReason() reason: string, @CurrentUser() user: SignedInUser): Promise<RigStatus[]> {
    return this.commands.emergencyStopAll(reason, user.account);
  }

  @Get(':rigId/status')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Where the rig is.' })
  @ApiOkResponse({ standardSchema: rigStatusDtoSchema })
  status(@Param('rigId') rigId: string): Promise<RigStatus> {
    return this.commands.status(rigId);
  }

  @Post(':rigId/arm')
  @HttpCode(200)
  @Roles('test-engineer', 'technician')
  @ApiOperation({ summary: 'Readies the rig for motion; moves nothing.' })
  @ApiOkResponse({ standardSchema: rigStatusDtoSchema })
  arm(@Param('rigId') rigId: string, @CurrentUser() user: SignedInUser): Promise<RigStatus> {
    return this.commands.arm(rigId, user.account);
  }

  @Post(':rigId/disarm')
  @HttpCode(200)
  @Roles('test-engineer', 'technician')
  @ApiOperation({ summary: 'Brings the rig to rest and forbids motion.' })
  @ApiOkResponse({ standardSchema: rigStatusDtoSchema })
  disarm(@Param('rigId') rigId: string, @CurrentUser() user: SignedInUser): Promise<RigStatus> {
    return this.commands.disarm(rigId, user.account);
  }

  @Post(':rigId/moves')
  @HttpCode(200)
  @Roles('test-engineer', 'technician')
  @ApiOperation({
    summary: 'Moves an actuator towards a value, inside the envelope.',
    description:
      'With `hold` the move goes on only while the same request is repeated within `hold.forS`; else the actuator stops where it is. `hold: null` is for scripts: the move goes on by itself to its end.',
  })
  @ApiOkResponse({ standardSchema: rigStatusDtoSchema })
  move(
    @Param('rigId') rigId: string,
    @Body({ schema: moveSchema }) body: Move,
    @CurrentUser() user: SignedInUser,
  ): Promise<RigStatus> {
    return this.commands.move(rigId, body, user.account);
  }

  @Post(':rigId/moves/release')
  @HttpCode(200)
  @Roles('test-engineer', 'technician')
  @ApiOperation({ summary: 'Ends a held move at once: the actuator stops where it is.' })
  @ApiOkResponse({ standardSchema: rigStatusDtoSchema })
  releaseMove(
    @Param('rigId') rigId: string,
    @Body({ schema: moveReleaseSchema }) body: MoveRelease,
  ): Promise<RigStatus> {
    return this.commands.releaseMove(rigId, body);
  }

  @Post(':rigId/emergency-stop')
  @HttpCode(200)
  @Roles('signed-in')
  @Emergency()
  @ApiOperation({
    summary: 'Stops the rig at once and latches it. A software stop: no substitute for the hard-wired one.',
  })
  @ApiBody(emergencyStopBody)
  @ApiOkResponse({ standardSchema: rigStatusDtoSchema })
  emergencyStop(
    @Param('rigId') rigId: string,
    @StopReason() reason: string,
    @CurrentUser() user: SignedInUser,
  ): Promise<RigStatus> {
    return this.commands.emergencyStop(rigId, reason, user.account);
  }

  @Post(':rigId/reset')
  @HttpCode(200)
  @Roles('safety-officer')
  @NeedsReauthentication()
  @ApiOperation({ summary: 'Clears a latched trip whose cause is gone; moves nothing.' })
  @ApiOkResponse({ standardSchema: rigStatusDtoSchema })
  reset(
    @Param('rigId') rigId: string,
    @Body({ schema: reasonedSchema }) body: Reasoned,
    @CurrentUser() user: SignedInUser,
  ): Promise<RigStatus> {
    return this.commands.reset(rigId, body.reason, user.account);
  }

  @Put(':rigId/connections/:connection/fault')
  @Roles('test-engineer')
  @ApiOperation({
    summary: 'Puts a fault on a connection of a bench, or takes it off; refused for any other rig.',
  })
  @ApiOkResponse({ standardSchema: rigStatusDtoSchema })
  setFault(
    @Param('rigId') rigId: string,
    @Param('connection') connection: string,
    @Body({ schema: faultChangeSchema }) body: FaultChange,
    @CurrentUser() user: SignedInUser,
  ): Promise<RigStatus> {
    return this.commands.setFault(rigId, connection, body, user.account);
  }
}
