import type { AuditRecord } from './dto/audit.dto.js';

const columns = [
  'id',
  'at',
  'account',
  'action',
  'rigId',
  'subject',
  'reason',
  'before',
  'after',
  'hash',
] as const;

/** First line of the export (RFC 4180). */
export const auditCsvHeader = `${columns.join(',')}\r\n`;

/** One entry as a line of the export (RFC 4180); what was before and after as JSON. */
export function auditCsvLine(entry: AuditRecord): string {
  return `${columns.map((column) => cell(entry[column])).join(',')}\r\n`;
}

function cell(value: unknown): string {
  if (value === null || value === undefined) return '';
  const text = typeof value === 'string' ? value : JSON.stringify(value);
  // A leading sign would be a formula to a spreadsheet that opens the file.
  const safe = /^[=+\-@\t\r]/.test(text) ? `'${text}` : text;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}
