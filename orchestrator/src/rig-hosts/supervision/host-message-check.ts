import { fromHostSchema, type FromHost } from '@cresthold/shared';

export type CheckedMessage = { isOk: true; message: FromHost } | { isOk: false; fault: string };

/**
 * Judges what a host sent. Telemetry comes twenty times a second with up to hundreds of numbers, so only
 * its outline is looked at: it reaches screens, never a decision. All else is checked in full.
 */
export function checkHostMessage(value: unknown): CheckedMessage {
  if (isTelemetry(value)) return { isOk: true, message: value };
  const parsed = fromHostSchema.safeParse(value);
  if (parsed.success) return { isOk: true, message: parsed.data };
  const issue = parsed.error.issues[0];
  const type = isRecord(value) ? String(value.type) : typeof value;
  return { isOk: false, fault: `${type}: ${issue?.path.join('.') ?? ''} ${issue?.message ?? ''}` };
}

function isTelemetry(value: unknown): value is Extract<FromHost, { type: 'telemetry' }> {
  if (!isRecord(value) || value.type !== 'telemetry' || !isRecord(value.telemetry)) return false;
  const { rigId, sequence, columns, rows } = value.telemetry;
  return (
    typeof rigId === 'string' && typeof sequence === 'number' && Array.isArray(columns) && Array.isArray(rows)
  );
}

function isRecord(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null;
}
