import { randomUUID } from 'node:crypto';
import { Inject, Injectable } from '@nestjs/common';
import { JwtService } from '@nestjs/jwt';
import { z } from 'zod';
import { UserStore } from '../users/user-store.js';
import { readSessionCookie, sessionLifetimeS } from './session-cookie.js';
import type { SignedInUser } from './signed-in-user.js';

export const SESSION_SECRET = Symbol('session-secret');

const sessionClaimsSchema = z.object({
  /** Account. */
  sub: z.string(),
  /** Generation of the account's sessions at sign-in; a later one ends this session. */
  generation: z.int(),
});
export type SessionClaims = z.infer<typeof sessionClaimsSchema>;

/** Issues sessions and says whose they are. */
@Injectable()
export class SessionsService {
  /** Sessions that were signed out, until they would have expired, ms since 1970; a restart forgets them. */
  private readonly signedOut = new Map<string, number>();

  constructor(
    @Inject(SESSION_SECRET) readonly secret: string,
    private readonly jwt: JwtService,
    private readonly users: UserStore,
  ) {}

  issue(account: string, generation: number): Promise<string> {
    const claims: SessionClaims = { sub: account, generation };
    return this.jwt.signAsync(claims, {
      secret: this.secret,
      algorithm: 'HS256',
      expiresIn: sessionLifetimeS,
      // Two sessions of one second are still two: signing out of one leaves the other.
      jwtid: randomUUID(),
    });
  }

  /** The session in a Cookie header; null where there is none or it was signed out. */
  tokenOf(header: string | undefined): string | null {
    const token = readSessionCookie(header);
    return token === null || this.signedOut.has(token) ? null : token;
  }

  /** Ends the session in a Cookie header, here and on every open connection that it was used for. */
  signOut(header: string | undefined): void {
    const token = readSessionCookie(header);
    const nowMs = Date.now();
    for (const [ended, untilMs] of this.signedOut) if (untilMs < nowMs) this.signedOut.delete(ended);
    if (token !== null) this.signedOut.set(token, nowMs + sessionLifetimeS * 1000);
  }

  /** Whose session it is; null where the account is gone, disabled, or its sessions were ended. */
  async userOf(claims: unknown): Promise<SignedInUser | null> {
    const parsed = sessionClaimsSchema.safeParse(claims);
    if (!parsed.success) return null;
    const user = await this.users.find(parsed.data.sub);
    if (user === null || !user.isEnabled || user.sessionGeneration !== parsed.data.generation) return null;
    return { account: user.account, title: user.title, roles: user.roles };
  }

  /** Whose session a Cookie header holds, e.g. that of a WebSocket's handshake; null where nobody's. */
  async userOfCookieHeader(header: string | undefined): Promise<SignedInUser | null> {
    const token = this.tokenOf(header);
    if (token === null) return null;
    try {
      return await this.userOf(
        await this.jwt.verifyAsync(token, { secret: this.secret, algorithms: ['HS256'] }),
      );
    } catch {
      // A bad signature or an expired session: whatever it is, it is nobody's.
      return null;
    }
  }
}
