import { Body, Controller, Get, HttpCode, Inject, Ip, Post, Req, Res } from '@nestjs/common';
import { ApiNoContentResponse, ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import type { Request, Response } from 'express';
import { CONFIG } from '../config/config.module.js';
import type { Config } from '../config/config.schema.js';
import { Roles } from './access.decorator.js';
import { AuthService } from './auth.service.js';
import {
  elevationSchema,
  passwordChangeSchema,
  reauthenticationSchema,
  sessionSchema,
  signInSchema,
  type Elevation,
  type PasswordChange,
  type Reauthentication,
  type Session,
  type SignIn,
} from './dto/session.dto.js';
import { sessionCookieName, sessionCookieOptions } from './session-cookie.js';
import { CurrentUser, type SignedInUser } from './signed-in-user.js';

@ApiTags('auth')
@Controller('auth')
export class AuthController {
  constructor(
    private readonly auth: AuthService,
    @Inject(CONFIG) private readonly config: Config,
  ) {}

  @Post('sign-in')
  @HttpCode(200)
  @Roles('anyone')
  @ApiOperation({
    summary: 'Signs in: answers who it is and sets the session cookie.',
    description:
      'Where the account has a second factor the answer is auth.code-needed until `code` is sent as well.',
  })
  @ApiOkResponse({ standardSchema: sessionSchema })
  async signIn(
    @Body({ schema: signInSchema }) body: SignIn,
    @Ip() address: string,
    @Req() request: Request,
    @Res({ passthrough: true }) response: Response,
  ): Promise<Session> {
    const place = { userAgent: request.headers['user-agent'] ?? '', address };
    const { session, token } = await this.auth.signIn(body, place, request.headers.cookie);
    this.setCookie(response, token);
    return session;
  }

  @Post('sign-out')
  @HttpCode(204)
  @Roles('signed-in')
  @ApiOperation({ summary: 'Signs out this browser.' })
  @ApiNoContentResponse()
  async signOut(
    @CurrentUser() user: SignedInUser,
    @Res({ passthrough: true }) response: Response,
  ): Promise<void> {
    await this.auth.signOut(user);
    response.clearCookie(sessionCookieName, { ...sessionCookieOptions(this.config), maxAge: undefined });
  }

  @Get('session')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Says who is signed in.' })
  @ApiOkResponse({ standardSchema: sessionSchema })
  session(@CurrentUser() { account, title, roles, rigLimits }: SignedInUser): Session {
    return { account, title, roles, rigLimits };
  }

  @Post('reauthenticate')
  @HttpCode(200)
  @Roles('signed-in')
  @ApiOperation({
    summary: 'Takes the password again: for five minutes acts that need it are allowed.',
    description:
      'Sets a new session cookie. Needed to approve an envelope and to reset a trip; never to stop.',
  })
  @ApiOkResponse({ standardSchema: elevationSchema })
  async reauthenticate(
    @Body({ schema: reauthenticationSchema }) body: Reauthentication,
    @CurrentUser() user: SignedInUser,
    @Ip() address: string,
    @Res({ passthrough: true }) response: Response,
  ): Promise<Elevation> {
    const { token, until } = await this.auth.reauthenticate(body, user, address);
    this.setCookie(response, token);
    return { until };
  }

  @Post('password')
  @HttpCode(204)
  @Roles('signed-in')
  @ApiOperation({ summary: 'Changes one’s own password; ends all other sessions of the account.' })
  @ApiNoContentResponse()
  async changePassword(
    @Body({ schema: passwordChangeSchema }) body: PasswordChange,
    @CurrentUser() user: SignedInUser,
    @Ip() address: string,
    @Res({ passthrough: true }) response: Response,
  ): Promise<void> {
    this.setCookie(response, await this.auth.changePassword(body, user, address));
  }

  private setCookie(response: Response, token: string): void {
    response.cookie(sessionCookieName, token, sessionCookieOptions(this.config));
  }
}
