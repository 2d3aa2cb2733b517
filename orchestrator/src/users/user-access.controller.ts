import { Body, Controller, Delete, Get, HttpCode, Param, Post } from '@nestjs/common';
import { ApiNoContentResponse, ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import { NeedsReauthentication, Roles } from '../auth/access.decorator.js';
import { signedInPlacesSchema, type SignedInPlaces } from '../auth/dto/session.dto.js';
import { CurrentUser, type SignedInUser } from '../auth/signed-in-user.js';
import { resetSecondFactorSchema, type ResetSecondFactor } from './dto/user.dto.js';
import { UserAccessService } from './user-access.service.js';

/** How other people get in. */
@ApiTags('users')
@Controller('users/:account')
export class UserAccessController {
  constructor(private readonly access: UserAccessService) {}

  @Get('sessions')
  @Roles('administrator')
  @ApiOperation({ summary: 'Lists where an account is signed in.' })
  @ApiOkResponse({ standardSchema: signedInPlacesSchema })
  sessions(
    @Param('account') account: string,
    @CurrentUser() { sessionId }: SignedInUser,
  ): Promise<SignedInPlaces> {
    return this.access.listSessions(account, sessionId);
  }

  @Delete('sessions')
  @HttpCode(204)
  @Roles('administrator')
  @ApiOperation({ summary: 'Ends all sessions of an account.' })
  @ApiNoContentResponse()
  endSessions(@Param('account') account: string, @CurrentUser() by: SignedInUser): Promise<void> {
    return this.access.endSessions(account, null, by.account);
  }

  @Delete('sessions/:sessionId')
  @HttpCode(204)
  @Roles('administrator')
  @ApiOperation({ summary: 'Ends one session of an account.' })
  @ApiNoContentResponse()
  endSession(
    @Param('account') account: string,
    @Param('sessionId') sessionId: string,
    @CurrentUser() by: SignedInUser,
  ): Promise<void> {
    return this.access.endSessions(account, sessionId, by.account);
  }

  @Post('second-factor/reset')
  @HttpCode(204)
  @Roles('administrator')
  @NeedsReauthentication()
  @ApiOperation({
    summary: 'Takes a lost authenticator away, with a reason; ends all sessions of the account.',
  })
  @ApiNoContentResponse()
  resetSecondFactor(
    @Param('account') account: string,
    @Body({ schema: resetSecondFactorSchema }) body: ResetSecondFactor,
    @CurrentUser() by: SignedInUser,
  ): Promise<void> {
    return this.access.resetSecondFactor(account, body, by.account);
  }
}
