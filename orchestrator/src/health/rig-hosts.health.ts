import { Injectable } from '@nestjs/common';
import { HealthIndicatorService, type HealthIndicatorFunction } from '@nestjs/terminus';
import { RigHostsService } from '../rig-hosts/rig-hosts.service.js';

/** One indicator for each rig's host. A rig that is offline or tripped is no fault of the server. */
@Injectable()
export class RigHostsHealth {
  constructor(
    private readonly hosts: RigHostsService,
    private readonly indicators: HealthIndicatorService,
  ) {}

  checks(): HealthIndicatorFunction[] {
    return this.hosts.faults().map(({ rigId, fault }) => () => {
      const indicator = this.indicators.check(`rig-host:${rigId}`);
      return fault === null ? indicator.up() : indicator.down({ message: fault });
    });
  }
}
