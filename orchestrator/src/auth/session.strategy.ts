import { Injectable } from '@nestjs/common';
import { PassportStrategy } from '@nestjs/passport';
import type { Request } from 'express';
import { Strategy } from 'passport-jwt';
import { SessionsService, type SessionClaims } from './sessions.service.js';
import type { SignedInUser } from './signed-in-user.js';

export const sessionStrategyName = 'session-cookie';

/** Reads the session cookie of a request; passport checks its signature and age. */
@Injectable()
export class SessionStrategy extends PassportStrategy(Strategy, sessionStrategyName) {
  constructor(private readonly sessions: SessionsService) {
    super({
      jwtFromRequest: (request: Request) => sessions.tokenOf(request.headers.cookie),
      secretOrKey: sessions.secret,
      algorithms: ['HS256'],
    });
  }

  /** @returns false where the account has been disabled or its sessions ended since */
  async validate(claims: SessionClaims): Promise<SignedInUser | false> {
    return (await this.sessions.userOf(claims)) ?? false;
  }
}
