import { Body, Controller, Get, HttpCode, Inject, Ip, Post, Req, Res } from '@nestjs/common';
import { ApiNoContentResponse, ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import type { Request, Response } from 'express';
import { CONFIG } from '../config/config.module.js';
import type { Config } from '../config/config.schema.js';
import { Roles } from './access.decorator.js';
import { AuthService } from './auth.service.js';
import { sessionSchema, signInSchema, type Session, type SignIn } from './dto/session.dto.js';
import { sessionCookieName, sessionCookieOptions } from './session-cookie.js';
import { SessionsService } from './sessions.service.js';
import { CurrentUser, type SignedInUser } from './signed-in-user.js';

@ApiTags('auth')
@Controller('auth')
export class AuthController {
  constructor(
    private readonly auth: AuthService,
    private readonly sessions: SessionsService,
    @Inject(CONFIG) private readonly config: Config,
  ) {}

  @Post('sign-in')
  @HttpCode(200)
  @Roles('anyone')
  @ApiOperation({ summary: 'Signs in: answers who it is and sets the session cookie.' })
  @ApiOkResponse({ standardSchema: sessionSchema })
  async signIn(
    @Body({ schema: signInSchema }) body: SignIn,
    @Ip() address: string,
    @Res({ passthrough: true }) response: Response,
  ): Promise<Session> {
    const { session, token } = await this.auth.signIn(body, address);
    response.cookie(sessionCookieName, token, sessionCookieOptions(this.config.isHttps));
    return session;
  }

  @Post('sign-out')
  @HttpCode(204)
  @Roles('signed-in')
  @ApiOperation({ summary: 'Signs out this browser.' })
  @ApiNoContentResponse()
  signOut(@Req() request: Request, @Res({ passthrough: true }) response: Response): void {
    this.sessions.signOut(request.headers.cookie);
    response.clearCookie(sessionCookieName, {
      ...sessionCookieOptions(this.config.isHttps),
      maxAge: undefined,
    });
  }

  @Get('session')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Says who is signed in.' })
  @ApiOkResponse({ standardSchema: sessionSchema })
  session(@CurrentUser() user: SignedInUser): Session {
    return user;
  }
}
