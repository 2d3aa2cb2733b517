import type { Theme } from '@mui/material/styles';

/** Room of a cell by what is in it, px. */
export const cellWidthPx = {
  text: 150,
  title: 190,
  choice: 150,
  number: 96,
  boolean: 110,
  json: 150,
} as const;

/** The table of channels: cells without frames of their own on a wide screen, a card for each row on a narrow one. */
export function channelTableStyles(theme: Theme) {
  const { vars } = theme;
  const field = {
    font: 'inherit',
    fontSize: '0.8125rem',
    color: vars.palette.text.primary,
    backgroundColor: vars.palette.background.paper,
    border: `1px solid ${vars.palette.divider}`,
    minHeight: 28,
    width: '100%',
    padding: '2px 6px',
    '&:hover': { borderColor: vars.palette.paper.outline },
    '&[aria-invalid=true]': {
      borderColor: vars.palette.paper.warn,
      backgroundColor: vars.palette.paper.warnWash,
    },
    '&::placeholder': { color: vars.palette.text.secondary, opacity: 1 },
  };
  return {
    borderCollapse: 'collapse',
    fontSize: '0.8125rem',
    '& th, & td': { padding: '3px 4px', verticalAlign: 'top', textAlign: 'left', fontWeight: 400 },
    '& thead th': {
      color: vars.palette.text.secondary,
      fontSize: '0.75rem',
      borderBottom: `1px solid ${vars.palette.paper.outline}`,
      verticalAlign: 'bottom',
    },
    '& tbody tr': { borderBottom: `1px solid ${vars.palette.divider}` },
    '& tbody th': { position: 'sticky', left: 0, zIndex: 1, backgroundColor: vars.palette.background.paper },
    '& input, & select': field,
    '& .cell-number': { textAlign: 'right' },
    '& .cell-fault': {
      color: vars.palette.paper.warn,
      fontSize: '0.75rem',
      lineHeight: 1.3,
      marginTop: '2px',
    },
    '& .cell-none': { color: vars.palette.text.secondary, textAlign: 'center' },
    [theme.breakpoints.down('md')]: {
      '&, & tbody, & tr, & td, & th': { display: 'block' },
      '& thead, & .cell-none, & .row-folded .cell-more': { display: 'none !important' },
      '& tbody tr': {
        border: `1px solid ${vars.palette.paper.outline}`,
        marginBottom: '12px',
        padding: '8px',
      },
      '& tbody td, & tbody th': {
        display: 'grid',
        gridTemplateColumns: '7.5rem minmax(0, 1fr)',
        columnGap: '8px',
        alignItems: 'center',
      },
      '& tbody th': { position: 'static' },
      '& tbody td::before, & tbody th::before': {
        content: 'attr(data-head)',
        color: vars.palette.text.secondary,
        fontSize: '0.75rem',
        overflowWrap: 'anywhere',
      },
      '& .cell-fault': { gridColumn: '2' },
      '& input, & select': { ...field, minHeight: 36 },
      '& tbody td.cell-wide': { display: 'block' },
    },
  } as const;
}
