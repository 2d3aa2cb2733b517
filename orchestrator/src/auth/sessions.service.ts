import { Inject, Injectable, Logger } from '@nestjs/common';
import { InjectRepository } from '@nestjs/typeorm';
import { DomainError } from '@cresthold/shared';
import { LessThan, Not, type EntityManager, type FindOptionsWhere, type Repository } from 'typeorm';
import { CONFIG } from '../config/config.module.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { newId } from '../ids/new-id.js';
import { UserStore } from '../users/user-store.js';
import { SessionEntity } from './entities/session.entity.js';
import {
  elevationS,
  isElevated,
  isIdle,
  isOver,
  isPreviousTokenGood,
  type SessionRules,
} from './session-clock.js';
import { readSessionCookie } from './session-cookie.js';
import { hashOfToken, newToken } from './session-token.js';
import type { SignedInUser } from './signed-in-user.js';

/** Where somebody signs in from. */
export interface SignInPlace {
  userAgent: string;
  address: string;
}

/** A session that is not over. */
export interface LiveSession {
  user: SignedInUser;
  /** Nobody has acted for long: only an emergency stop is taken from it. */
  isIdle: boolean;
  /** The password was given again a short while ago. */
  isElevated: boolean;
}

/** How exactly the last act is kept on disk; in memory it is exact. */
const seenEveryMs = 60_000;
const textMax = 300;

/** Begins, finds, renews and ends sessions; they are in the database, so that a restart changes nothing. */
@Injectable()
export class SessionsService {
  private readonly logger = new Logger(SessionsService.name);
  private readonly lastSeenMs = new Map<string, number>();

  constructor(
    @InjectRepository(SessionEntity) private readonly sessions: Repository<SessionEntity>,
    private readonly users: UserStore,
    private readonly queue: TransactionQueue,
    @Inject(CONFIG) private readonly rules: SessionRules,
  ) {}

  /** @returns the token, which is kept nowhere else, and the session's id */
  async begin(account: string, place: SignInPlace): Promise<{ id: string; token: string }> {
    const token = newToken();
    const now = new Date(Date.now());
    const at = now.toISOString();
    const row: SessionEntity = {
      id: newId(),
      tokenHash: hashOfToken(token),
      previousTokenHash: null,
      account,
      userAgent: place.userAgent.slice(0, textMax),
      address: place.address.slice(0, textMax),
      beganAt: at,
      lastSeenAt: at,
      renewedAt: at,
      elevatedUntil: null,
    };
    const oldest = new Date(now.getTime() - this.rules.sessionMaxS * 1000).toISOString();
    await this.queue.transaction(async (manager) => {
      await manager.delete(SessionEntity, { beganAt: LessThan(oldest) });
      await manager.insert(SessionEntity, row);
    });
    return { id: row.id, token };
  }

  /** The session that a Cookie header holds; null where there is none or it is over. */
  async ofCookieHeader(header: string | undefined): Promise<LiveSession | null> {
    const token = readSessionCookie(header);
    return token === null ? null : this.ofRow(await this.rowOf(token));
  }

  /** The session again, e.g. of an open connection. */
  async ofId(id: string): Promise<LiveSession | null> {
    return this.ofRow(await this.sessions.findOneBy({ id }));
  }

  /** Keeps that the person acted. Never waited for: an emergency stop must not wait for the disk. */
  touch(id: string): void {
    const nowMs = Date.now();
    const beforeMs = this.lastSeenMs.get(id) ?? 0;
    this.lastSeenMs.set(id, nowMs);
    if (Math.floor(beforeMs / seenEveryMs) === Math.floor(nowMs / seenEveryMs)) return;
    const lastSeenAt = new Date(nowMs).toISOString();
    this.queue
      .transaction((manager) => manager.update(SessionEntity, { id }, { lastSeenAt }))
      .catch((error: unknown) => this.logger.error('A session could not be updated.', error));
  }

  /** After the password was given again: a new token, and acts that need it are allowed for a while. */
  async elevate(id: string): Promise<{ token: string; until: string }> {
    const token = await this.renew(id);
    const until = new Date(Date.now() + elevationS * 1000).toISOString();
    await this.queue.transaction((manager) =>
      manager.update(SessionEntity, { id }, { elevatedUntil: until }),
    );
    return { token, until };
  }

  /**
   * Gives the session a new token (ASVS 5.0, 7.2.4).
   *
   * @throws auth.required where the session has ended meanwhile
   */
  async renew(id: string): Promise<string> {
    const token = newToken();
    await this.queue.transaction(async (manager) => {
      const row = await manager.findOneBy(SessionEntity, { id });
      if (row === null) throw new DomainError('auth.required');
      await manager.update(
        SessionEntity,
        { id },
        {
          tokenHash: hashOfToken(token),
          previousTokenHash: row.tokenHash,
          renewedAt: new Date(Date.now()).toISOString(),
        },
      );
    });
    return token;
  }

  /** Sessions of an account that are not over, newest first. */
  async list(account: string): Promise<SessionEntity[]> {
    const rows = await this.sessions.find({ where: { account }, order: { id: 'DESC' } });
    return rows
      .filter((row) => !isOver(row, this.rules, Date.now()))
      .map((row) => ({ ...row, lastSeenAt: new Date(this.seenMs(row)).toISOString() }));
  }

  /** @returns how many were ended: 1, or 0 where the account has no such session */
  end(account: string, id: string): Promise<number> {
    return this.endWhere({ account, id });
  }

  /** @param except session that stays */
  endAll(account: string, except: string | null = null): Promise<number> {
    return this.endWhere(except === null ? { account } : { account, id: Not(except) });
  }

  private endWhere(where: FindOptionsWhere<SessionEntity>): Promise<number> {
    return this.queue.transaction(async (manager: EntityManager) => {
      const { affected } = await manager.delete(SessionEntity, where);
      return affected ?? 0;
    });
  }

  private async rowOf(token: string): Promise<SessionEntity | null> {
    const hash = hashOfToken(token);
    const row = await this.sessions.findOneBy({ tokenHash: hash });
    if (row !== null) return row;
    const before = await this.sessions.findOneBy({ previousTokenHash: hash });
    return before !== null && isPreviousTokenGood(before, Date.now()) ? before : null;
  }

  private async ofRow(row: SessionEntity | null): Promise<LiveSession | null> {
    const nowMs = Date.now();
    if (row === null || isOver(row, this.rules, nowMs)) return null;
    const user = await this.users.find(row.account);
    if (user === null || !user.isEnabled) return null;
    const { account, title, roles, rigLimits } = user;
    return {
      user: { account, title, roles, rigLimits, sessionId: row.id },
      isIdle: isIdle(this.seenMs(row), this.rules, nowMs),
      isElevated: isElevated(row, nowMs),
    };
  }

  private seenMs(row: SessionEntity): number {
    return Math.max(this.lastSeenMs.get(row.id) ?? 0, Date.parse(row.lastSeenAt));
  }
}
