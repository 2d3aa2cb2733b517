import { Module } from '@nestjs/common';
import { AuditReader } from './audit-reader.service.js';
import { AuditController } from './audit.controller.js';
import { AuditService } from './audit.service.js';

@Module({ controllers: [AuditController], providers: [AuditReader, AuditService], exports: [AuditService] })
export class AuditModule {}
