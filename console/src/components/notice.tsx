import type { ReactNode } from 'react';
import Box from '@mui/material/Box';
import type { Theme } from '@mui/material/styles';

/** `trip` for trips and failed emergency stops only, `warn` for warnings, `act` for what a person must do. */
export type NoticeKind = 'trip' | 'warn' | 'act' | 'plain';

const grounds = { trip: 'tripWash', warn: 'warnWash', act: 'actWash' } as const;

const look = (kind: NoticeKind) => (theme: Theme) => {
  const { paper, text } = theme.vars.palette;
  const colour = kind === 'plain' ? text.primary : paper[kind];
  return {
    border: `1px solid ${kind === 'plain' ? paper.outline : colour}`,
    borderLeft: `6px solid ${kind === 'plain' ? paper.outline : colour}`,
    backgroundColor: kind === 'plain' ? paper.sheet : paper[grounds[kind]],
    color: colour,
  };
};

interface NoticeProps {
  kind: NoticeKind;
  title: ReactNode;
  children?: ReactNode;
  actions?: ReactNode;
  /** `alert` where it comes up by itself and must be heard at once. */
  role?: 'alert' | 'status';
}

/** A message in the page with its kind by colour, edge and words. */
export function Notice({ kind, title, children, actions, role }: NoticeProps) {
  return (
    <Box
      role={role}
      sx={[look(kind), { px: 1.5, py: 1, display: 'flex', flexWrap: 'wrap', gap: 1, alignItems: 'center' }]}
    >
      <Box sx={{ flex: '1 1 16rem', minWidth: 0 }}>
        <Box sx={{ fontWeight: 700 }}>{title}</Box>
        {children !== undefined && (
          <Box sx={{ color: 'text.primary', fontSize: '0.8125rem' }}>{children}</Box>
        )}
      </Box>
      {actions}
    </Box>
  );
}
