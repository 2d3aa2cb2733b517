import { Body, Controller, Get, HttpCode, Param, Post, Put } from '@nestjs/common';
import { ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { RigStatus } from '@cresthold/shared';
import { Roles } from '../auth/access.decorator.js';
import { CurrentUser, type SignedInUser } from '../auth/signed-in-user.js';
import {
  emergencyStopSchema,
  lockoutSchema,
  moveSchema,
  reasonedSchema,
  rigStatusListSchema,
  rigStatusResponseSchema,
  type EmergencyStop,
  type LockoutChange,
  type Move,
  type Reasoned,
} from './dto/rig-commands.dto.js';
import { RigCommandsService } from './rig-commands.service.js';

/** What people do to a rig by hand. Each answers with the rig's status as it follows. */
@ApiTags('rigs')
@Controller('rigs')
export class RigCommandsController {
  constructor(private readonly commands: RigCommandsService) {}

  /** Stops every rig at once and latches it. A software stop: no substitute for the hard-wired one. */
  @Post('emergency-stop')
  @HttpCode(200)
  @Roles('signed-in')
  @ApiOkResponse({ standardSchema: rigStatusListSchema })
  emergencyStopAll(
    @Body({ schema: emergencyStopSchema }) body: EmergencyStop,
    @CurrentUser() user: SignedInUser,
  ): Promise<RigStatus[]> {
    return this.commands.emergencyStopAll(body, user.account);
  }

  /** Where the rig is. */
  @Get(':rigId/status')
  @Roles('signed-in')
  @ApiOkResponse({ standardSchema: rigStatusResponseSchema })
  status(@Param('rigId') rigId: string): Promise<RigStatus> {
    return this.commands.status(rigId);
  }

  /** Readies the rig for motion; moves nothing. */
  @Post(':rigId/arm')
  @HttpCode(200)
  @Roles('test-engineer', 'technician')
  @ApiOkResponse({ standardSchema: rigStatusResponseSchema })
  arm(@Param('rigId') rigId: string, @CurrentUser() user: SignedInUser): Promise<RigStatus> {
    return this.commands.arm(rigId, user.account);
  }

  /** Brings the rig to rest and forbids motion. */
  @Post(':rigId/disarm')
  @HttpCode(200)
  @Roles('test-engineer', 'technician')
  @ApiOkResponse({ standardSchema: rigStatusResponseSchema })
  disarm(@Param('rigId') rigId: string, @CurrentUser() user: SignedInUser): Promise<RigStatus> {
    return this.commands.disarm(rigId, user.account);
  }

  /** Ramps an actuator to a value, inside the envelope. */
  @Post(':rigId/moves')
  @HttpCode(200)
  @Roles('test-engineer', 'technician')
  @ApiOkResponse({ standardSchema: rigStatusResponseSchema })
  move(
    @Param('rigId') rigId: string,
    @Body({ schema: moveSchema }) body: Move,
    @CurrentUser() user: SignedInUser,
  ): Promise<RigStatus> {
    return this.commands.move(rigId, body, user.account);
  }

  /** Stops the rig at once and latches it. A software stop: no substitute for the hard-wired one. */
  @Post(':rigId/emergency-stop')
  @HttpCode(200)
  @Roles('signed-in')
  @ApiOkResponse({ standardSchema: rigStatusResponseSchema })
  emergencyStop(
    @Param('rigId') rigId: string,
    @Body({ schema: emergencyStopSchema }) body: EmergencyStop,
    @CurrentUser() user: SignedInUser,
  ): Promise<RigStatus> {
    return this.commands.emergencyStop(rigId, body, user.account);
  }

  /** Clears a latched trip whose cause is gone; moves nothing. */
  @Post(':rigId/reset')
  @HttpCode(200)
  @Roles('safety-officer')
  @ApiOkResponse({ standardSchema: rigStatusResponseSchema })
  reset(
    @Param('rigId') rigId: string,
    @Body({ schema: reasonedSchema }) body: Reasoned,
    @CurrentUser() user: SignedInUser,
  ): Promise<RigStatus> {
    return this.commands.reset(rigId, body.reason, user.account);
  }

  /** Locks the rig out or lifts the lockout. */
  @Put(':rigId/lockout')
  @Roles('safety-officer')
  @ApiOkResponse({ standardSchema: rigStatusResponseSchema })
  setLockout(
    @Param('rigId') rigId: string,
    @Body({ schema: lockoutSchema }) body: LockoutChange,
    @CurrentUser() user: SignedInUser,
  ): Promise<RigStatus> {
    return this.commands.setLockout(rigId, body, user.account);
  }
}
