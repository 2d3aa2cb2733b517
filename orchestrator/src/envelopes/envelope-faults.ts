import { fitEnvelope, Readings, type EnvelopeContent, type FieldFault, type Rig } from '@cresthold/shared';
import { faultsOf, prefixFaults } from '../documents/prefix-faults.js';

/**
 * What is wrong with an envelope for a rig beyond its schema: limits of what is no actuator, interlocks that
 * do not compile. Judged by the code that applies it in the scan, so that what is approved also runs there.
 */
export function envelopeFaults(content: EnvelopeContent, rig: Rig): FieldFault[] {
  const faults = faultsOf(
    () => fitEnvelope({ id: '', version: 0, content }, rig, new Map(), Readings.of(rig)),
    '',
  );
  return prefixFaults(faults, 'content');
}
