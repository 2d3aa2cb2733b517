import { wireFaultForms, type InjectedFault } from '@cresthold/shared';
import Box from '@mui/material/Box';
import { formatInstant } from '../../components/index.js';

export const faultTitle = (kind: InjectedFault['fault']['kind']): string =>
  wireFaultForms.find((form) => form.kind === kind)?.title ?? kind;

/** Says beside a connection that it is made to fail on purpose, so that nobody takes it for the device's doing. */
export function InjectedFaultNotice({ injected }: { injected: InjectedFault }) {
  const { fault, by, at, isActive } = injected;
  const whom = fault.channels === null ? '' : ` on ${fault.channels.join(', ')}`;
  return (
    <Box sx={{ fontSize: '0.8125rem', color: 'paper.warn' }}>
      <strong>Fault put on purpose</strong>: {faultTitle(fault.kind)}
      {whom}, by {by} at {formatInstant(at)}
      {isActive ? '.' : ', not acting now.'}
    </Box>
  );
}
