import { Module } from '@nestjs/common';
import { AuditModule } from '../audit/audit.module.js';
import { InterlocksController } from './interlocks.controller.js';
import { InterlocksService } from './interlocks.service.js';

@Module({ imports: [AuditModule], controllers: [InterlocksController], providers: [InterlocksService] })
export class InterlocksModule {}
