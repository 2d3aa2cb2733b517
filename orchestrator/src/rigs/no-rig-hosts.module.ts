import { Global, Module } from '@nestjs/common';
import { DomainError, type RigStatus } from '@cresthold/shared';
import { RigHostsPort } from './rig-hosts.port.js';

/** A server without rig hosts: every rig is offline. */
export class NoRigHosts extends RigHostsPort {
  status(): RigStatus | null {
    return null;
  }

  command(): Promise<void> {
    return Promise.reject(new DomainError('host.unavailable'));
  }

  reconfigure(): Promise<void> {
    return Promise.resolve();
  }
}

/** Stands in for the supervisor where no rig is to be driven, e.g. when a scenario is loaded. */
@Global()
@Module({ providers: [{ provide: RigHostsPort, useClass: NoRigHosts }], exports: [RigHostsPort] })
export class NoRigHostsModule {}
