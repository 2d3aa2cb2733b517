import { Injectable } from '@nestjs/common';
import type { RigStatus } from '@cresthold/shared';
import { AuditService } from '../audit/audit.service.js';
import { RigHostsService } from '../rig-hosts/rig-hosts.service.js';
import type { BypassOrder } from './dto/interlock.dto.js';

/** What people do to the interlocks in force; each act is kept with who did it, in runs and outside of them. */
@Injectable()
export class InterlocksService {
  constructor(
    private readonly hosts: RigHostsService,
    private readonly audit: AuditService,
  ) {}

  /**
   * @throws interlock.not-found, interlock.no-bypass, request.invalid where it is longer than the envelope allows
   */
  async bypass(
    rigId: string,
    interlock: string,
    { forS, reason }: BypassOrder,
    by: string,
  ): Promise<RigStatus> {
    const command = { type: 'bypass-interlock', interlock, forS, by, reason } as const;
    const status = await this.hosts.commandForStatus(rigId, command);
    const untilAt = status.interlocks.find(({ id }) => id === interlock)?.bypass?.untilAt ?? null;
    const act = { account: by, action: 'interlock.bypassed', rigId, subject: interlock, reason };
    await this.audit.record({ ...act, after: { forS, untilAt } });
    return status;
  }

  /** @throws interlock.not-found, interlock.not-bypassed */
  async endBypass(rigId: string, interlock: string, by: string): Promise<RigStatus> {
    const status = await this.hosts.commandForStatus(rigId, { type: 'end-bypass', interlock, by });
    await this.audit.record({ account: by, action: 'interlock.bypass-ended', rigId, subject: interlock });
    return status;
  }

  /** @throws interlock.not-found, interlock.not-latched */
  async acknowledge(rigId: string, interlock: string, by: string): Promise<RigStatus> {
    const status = await this.hosts.commandForStatus(rigId, {
      type: 'acknowledge-interlock',
      interlock,
      by,
    });
    await this.audit.record({ account: by, action: 'interlock.acknowledged', rigId, subject: interlock });
    return status;
  }
}
