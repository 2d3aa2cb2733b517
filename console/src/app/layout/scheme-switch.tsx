import IconButton from '@mui/material/IconButton';
import { useColorScheme } from '@mui/material/styles';

const next = { system: 'light', light: 'dark', dark: 'system' } as const;
const says = { system: 'as the system', light: 'paper', dark: 'dark room' } as const;
const glyphs = { system: '◐', light: '○', dark: '●' } as const;

/** Paper, dark room, or as the system; remembered by this browser. */
export function SchemeSwitch() {
  const { mode = 'system', setMode } = useColorScheme();
  return (
    <IconButton
      onClick={() => setMode(next[mode])}
      aria-label={`Look: ${says[mode]}. Change to ${says[next[mode]]}.`}
      title={`Look: ${says[mode]}`}
      size="small"
      sx={{ color: 'inherit', width: 32, height: 32, fontSize: '1.125rem' }}
    >
      <span aria-hidden="true">{glyphs[mode]}</span>
    </IconButton>
  );
}
