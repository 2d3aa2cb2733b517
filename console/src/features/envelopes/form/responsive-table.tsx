import type { ReactNode } from 'react';
import Box from '@mui/material/Box';
import Table from '@mui/material/Table';
import TableBody from '@mui/material/TableBody';
import TableCell from '@mui/material/TableCell';
import TableHead from '@mui/material/TableHead';
import TableRow from '@mui/material/TableRow';
import type { Theme } from '@mui/material/styles';

/** Fields in a table are close to each other. */
const closeFields = {
  '& td:has(input, select)': { padding: '6px 3px' },
  '& td .MuiInputBase-root': { paddingRight: '6px' },
  '& td input': { paddingLeft: '8px', paddingRight: '2px' },
  '& td select': { paddingLeft: '8px', paddingRight: '22px !important' },
};

/** Below this width rows become cards, each cell with its column's name before it. */
const asCards = (theme: Theme) => ({
  [theme.breakpoints.down('md')]: {
    '&, & tbody, & tr, & td, & th': { display: 'block' },
    '& thead': { display: 'none' },
    '& tr + tr': { borderTop: `2px solid ${theme.vars.palette.text.primary}` },
    '& tbody td, & tbody td:has(input, select)': {
      display: 'grid',
      gridTemplateColumns: '11rem minmax(0, 1fr)',
      gap: '8px',
      alignItems: 'center',
      borderBottom: 0,
      padding: '4px 0',
    },
    '& tbody td::before': {
      content: 'attr(data-head)',
      color: theme.vars.palette.text.secondary,
      fontSize: '0.75rem',
    },
    '& tbody th': { padding: '8px 0 4px' },
  },
  [theme.breakpoints.down('sm')]: {
    '& tbody td, & tbody td:has(input, select)': { gridTemplateColumns: '8rem minmax(0, 1fr)' },
  },
});

interface ResponsiveTableProps {
  label: string;
  /** Room that the columns need side by side, px; it scrolls where there is less. */
  minWidthPx: number;
  heads: readonly string[];
  /** Cells of each row; the first is its head. */
  rows: readonly (readonly ReactNode[])[];
}

/** A table that scrolls inside itself, and becomes cards where there is no room for it. */
export function ResponsiveTable({ label, minWidthPx, heads, rows }: ResponsiveTableProps) {
  return (
    <Box sx={{ overflowX: 'auto' }} tabIndex={0} role="region" aria-label={`${label}, table`}>
      <Table size="small" aria-label={label} sx={[{ minWidth: { md: minWidthPx } }, closeFields, asCards]}>
        <TableHead>
          <TableRow>
            {heads.map((head, index) => (
              <TableCell key={`${head}-${index}`}>{head}</TableCell>
            ))}
          </TableRow>
        </TableHead>
        <TableBody>
          {rows.map((cells, row) => (
            <TableRow key={row} sx={{ verticalAlign: 'top' }}>
              {cells.map((cell, column) =>
                column === 0 ? (
                  <TableCell key={column} component="th" scope="row">
                    {cell}
                  </TableCell>
                ) : (
                  <TableCell key={column} data-head={heads[column]}>
                    {cell}
                  </TableCell>
                ),
              )}
            </TableRow>
          ))}
        </TableBody>
      </Table>
    </Box>
  );
}
