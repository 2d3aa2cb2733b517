import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import TextField from '@mui/material/TextField';
import type { SerialPort } from '../../../api/index.js';
import { ProblemNotice } from '../../../components/index.js';
import { useSerialPorts } from '../api/wiring-queries.js';

interface SerialPortChoiceProps {
  path: unknown;
  onPath: (path: string) => void;
}

/** The serial ports of the server's machine with what is known of each; any other path can be typed below. */
export function SerialPortChoice({ path, onPath }: SerialPortChoiceProps) {
  const ports = useSerialPorts();
  if (ports.error) {
    return (
      <ProblemNotice
        title="The serial ports cannot be listed"
        error={ports.error}
        onRetry={() => void ports.refetch()}
      />
    );
  }
  const listed = ports.data ?? [];
  const chosen = listed.find((port) => pathOf(port) === path || port.path === path);
  return (
    <Box sx={{ display: 'flex', gap: 1, flexWrap: 'wrap', alignItems: 'flex-start' }}>
      <TextField
        select
        label="Port on the server's machine"
        value={chosen ? pathOf(chosen) : ''}
        onChange={({ target }) => target.value !== '' && onPath(target.value)}
        helperText={
          ports.data && listed.length === 0 ? 'None is plugged in: type its path below.' : portText(chosen)
        }
        slotProps={{ select: { native: true }, inputLabel: { shrink: true } }}
        sx={{ flex: '1 1 16rem', maxWidth: '40rem' }}
      >
        <option value="">{ports.isPending ? 'looking …' : 'typed below'}</option>
        {listed.map((port) => (
          <option key={port.path} value={pathOf(port)}>
            {port.path} {port.manufacturer ?? ''}
          </option>
        ))}
      </TextField>
      <Button disabled={ports.isFetching} onClick={() => void ports.refetch()}>
        Look again
      </Button>
    </Box>
  );
}

/** The path that stays the same wherever the device is plugged in, where there is one. */
function pathOf({ path, stablePath }: SerialPort): string {
  return stablePath ?? path;
}

function portText(port: SerialPort | undefined): string | undefined {
  if (!port) return undefined;
  const usb = port.vendorId ? `USB ${port.vendorId}:${port.productId ?? '?'}` : null;
  const serial = port.serialNumber ? `serial number ${port.serialNumber}` : null;
  return [port.path, port.manufacturer, usb, serial].filter(Boolean).join(', ');
}
