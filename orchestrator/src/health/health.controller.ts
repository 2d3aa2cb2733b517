import { Controller, Get } from '@nestjs/common';
import { ApiOperation, ApiTags } from '@nestjs/swagger';
import { HealthCheck, HealthCheckService, TypeOrmHealthIndicator } from '@nestjs/terminus';
import type { HealthCheckResult } from '@nestjs/terminus';
import { Roles } from '../auth/access.decorator.js';
import { RigHostsHealth } from './rig-hosts.health.js';

const databaseBoundMs = 2_000;

@ApiTags('health')
@Controller('health')
export class HealthController {
  constructor(
    private readonly checks: HealthCheckService,
    private readonly database: TypeOrmHealthIndicator,
    private readonly rigHosts: RigHostsHealth,
  ) {}

  /** 503 names the parts that do not work. */
  @Get()
  @Roles('anyone')
  @HealthCheck()
  @ApiOperation({ summary: 'Say whether the database and every rig host work.' })
  check(): Promise<HealthCheckResult> {
    return this.checks.check([
      () => this.database.pingCheck('database', { timeout: databaseBoundMs }),
      ...this.rigHosts.checks(),
    ]);
  }
}
