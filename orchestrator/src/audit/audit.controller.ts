import { Readable } from 'node:stream';
import { Controller, Get, Query, StreamableFile } from '@nestjs/common';
import { ApiOkResponse, ApiOperation, ApiProduces, ApiTags } from '@nestjs/swagger';
import { Roles } from '../auth/access.decorator.js';
import { VisibleRigs, type RigScope } from '../auth/rig-scope.js';
import type { Page } from '../paging/page.js';
import { auditCsvHeader, auditCsvLine } from './audit-csv.js';
import { AuditReader } from './audit-reader.service.js';
import {
  auditFilterSchema,
  auditPageSchema,
  auditQuerySchema,
  auditVerificationSchema,
  type AuditFilter,
  type AuditQuery,
  type AuditRecord,
  type AuditVerification,
} from './dto/audit.dto.js';

@ApiTags('audit')
@Controller('audit')
export class AuditController {
  constructor(private readonly reader: AuditReader) {}

  @Get()
  @Roles('administrator', 'safety-officer')
  @ApiOperation({ summary: 'Searches the audit log, newest first.' })
  @ApiOkResponse({ standardSchema: auditPageSchema })
  list(
    @Query({ schema: auditQuerySchema }) query: AuditQuery,
    @VisibleRigs() visible: RigScope,
  ): Promise<Page<AuditRecord>> {
    return this.reader.list(query, visible);
  }

  @Get('verification')
  @Roles('administrator', 'safety-officer')
  @ApiOperation({
    summary: 'Recomputes the hash chain of the audit log.',
    description:
      'Says where the chain breaks first, and which runs have another seal than the one kept in it. Note the head hash elsewhere from time to time: it proves that nothing was cut off since.',
  })
  @ApiOkResponse({ standardSchema: auditVerificationSchema })
  verify(): Promise<AuditVerification> {
    return this.reader.verify();
  }

  @Get('export')
  @Roles('administrator', 'safety-officer')
  @ApiOperation({ summary: 'Exports the entries that match as CSV (RFC 4180), oldest first.' })
  @ApiProduces('text/csv')
  @ApiOkResponse({ content: { 'text/csv': { schema: { type: 'string' } } } })
  export(
    @Query({ schema: auditFilterSchema }) filter: AuditFilter,
    @VisibleRigs() visible: RigScope,
  ): StreamableFile {
    const disposition = 'attachment; filename="audit.csv"';
    return new StreamableFile(Readable.from(this.lines(filter, visible)), {
      type: 'text/csv; charset=utf-8',
      disposition,
    });
  }

  private async *lines(filter: AuditFilter, visible: RigScope): AsyncGenerator<string> {
    yield auditCsvHeader;
    for await (const entry of this.reader.all(filter, visible)) yield auditCsvLine(entry);
  }
}
