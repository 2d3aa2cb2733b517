import { Controller, Delete, Get, HttpCode, Param } from '@nestjs/common';
import { ApiNoContentResponse, ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import { Roles } from './access.decorator.js';
import { AuthService } from './auth.service.js';
import { signedInPlacesSchema, type SignedInPlaces } from './dto/session.dto.js';
import { toPlaces } from './session.mapper.js';
import { SessionsService } from './sessions.service.js';
import { CurrentUser, type SignedInUser } from './signed-in-user.js';

/** One's own sessions. */
@ApiTags('auth')
@Controller('auth/sessions')
export class SessionsController {
  constructor(
    private readonly sessions: SessionsService,
    private readonly auth: AuthService,
  ) {}

  @Get()
  @Roles('signed-in')
  @ApiOperation({ summary: 'Lists where one is signed in.' })
  @ApiOkResponse({ standardSchema: signedInPlacesSchema })
  async list(@CurrentUser() { account, sessionId }: SignedInUser): Promise<SignedInPlaces> {
    return toPlaces(await this.sessions.list(account), sessionId);
  }

  @Delete()
  @HttpCode(204)
  @Roles('signed-in')
  @ApiOperation({ summary: 'Ends all one’s sessions but this.' })
  @ApiNoContentResponse()
  endOthers(@CurrentUser() user: SignedInUser): Promise<void> {
    return this.auth.endSessions(user, null);
  }

  @Delete(':sessionId')
  @HttpCode(204)
  @Roles('signed-in')
  @ApiOperation({ summary: 'Ends one of one’s sessions.' })
  @ApiNoContentResponse()
  end(@Param('sessionId') sessionId: string, @CurrentUser() user: SignedInUser): Promise<void> {
    return this.auth.endSessions(user, sessionId);
  }
}
