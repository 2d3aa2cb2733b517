import { Body, Controller, Get, HttpCode, Param, Post } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import { Roles } from '../auth/access.decorator.js';
import { CurrentUser, type SignedInUser } from '../auth/signed-in-user.js';
import { reasonedSchema, type Reasoned } from '../rig-hosts/dto/rig-commands.dto.js';
import {
  lockoutListSchema,
  lockoutSchema,
  newLockoutSchema,
  type Lockout,
  type NewLockout,
} from './dto/lockout.dto.js';
import { LockoutsService } from './lockouts.service.js';

/** Every person's own hold on a rig. */
@ApiTags('rigs')
@Controller('rigs/:rigId/lockouts')
export class LockoutsController {
  constructor(private readonly lockouts: LockoutsService) {}

  @Get()
  @Roles('signed-in')
  @ApiOperation({ summary: 'Lists who holds the rig, oldest first; empty where nobody does.' })
  @ApiOkResponse({ standardSchema: lockoutListSchema })
  list(@Param('rigId') rigId: string): Promise<Lockout[]> {
    return this.lockouts.list(rigId);
  }

  @Post()
  @Roles('test-engineer', 'technician', 'safety-officer', 'administrator')
  @ApiOperation({ summary: 'Locks the rig out: it stops in order, and nobody arms it until all are lifted.' })
  @ApiCreatedResponse({ standardSchema: lockoutSchema })
  set(
    @Param('rigId') rigId: string,
    @Body({ schema: newLockoutSchema }) body: NewLockout,
    @CurrentUser() user: SignedInUser,
  ): Promise<Lockout> {
    return this.lockouts.set(rigId, body, user.account);
  }

  @Post(':lockoutId/lift')
  @HttpCode(200)
  @Roles('test-engineer', 'technician', 'safety-officer', 'administrator')
  @ApiOperation({ summary: 'Lifts a lockout: one’s own, or one that names you. Answers those that remain.' })
  @ApiOkResponse({ standardSchema: lockoutListSchema })
  lift(
    @Param('rigId') rigId: string,
    @Param('lockoutId') lockoutId: string,
    @Body({ schema: reasonedSchema }) body: Reasoned,
    @CurrentUser() user: SignedInUser,
  ): Promise<Lockout[]> {
    return this.lockouts.lift(rigId, lockoutId, body.reason, user);
  }
}
