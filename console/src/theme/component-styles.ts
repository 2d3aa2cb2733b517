import type { Theme, ThemeOptions } from '@mui/material/styles';
import './palette-augmentation.js';

/** Visible focus everywhere: an ink frame with a gap of ground. */
const focusFrame = { outline: '2px solid currentColor', outlineOffset: '2px' };

function globalStyles(theme: Theme) {
  const { vars } = theme;
  return {
    html: { scrollPaddingTop: '9rem' },
    body: { fontVariantNumeric: 'tabular-nums', overflowWrap: 'break-word' },
    ':focus-visible': { outline: `2px solid ${vars.palette.text.primary}`, outlineOffset: '2px' },
    'h1:focus, main:focus': { outline: 'none' },
    'a:not([class])': { color: 'inherit' },
    '@media (prefers-reduced-motion: reduce)': {
      '*, *::before, *::after': { animation: 'none !important', transition: 'none !important' },
    },
  } as const;
}

const buttons: ThemeOptions['components'] = {
  MuiButtonBase: { defaultProps: { disableRipple: true } },
  MuiButton: {
    defaultProps: { disableElevation: true, variant: 'outlined', size: 'small' },
    styleOverrides: {
      root: ({ theme }) => ({
        minHeight: 32,
        borderColor: theme.vars.palette.paper.outline,
        whiteSpace: 'nowrap',
        '&:focus-visible': focusFrame,
        '&.Mui-disabled': {
          color: theme.vars.palette.text.secondary,
          borderStyle: 'dashed',
          borderColor: theme.vars.palette.paper.outline,
          backgroundColor: 'transparent',
        },
      }),
      contained: { borderWidth: 1, borderStyle: 'solid', borderColor: 'transparent' },
    },
  },
  MuiIconButton: { styleOverrides: { root: { borderRadius: 0, '&:focus-visible': focusFrame } } },
};

const fields: ThemeOptions['components'] = {
  MuiTextField: { defaultProps: { size: 'small', variant: 'outlined' } },
  MuiFormControl: { defaultProps: { size: 'small' } },
  MuiOutlinedInput: {
    styleOverrides: {
      root: ({ theme }) => ({ backgroundColor: theme.vars.palette.background.paper }),
      notchedOutline: ({ theme }) => ({ borderColor: theme.vars.palette.paper.outline }),
      input: { fontSize: '0.875rem' },
    },
  },
  MuiInputLabel: {
    styleOverrides: {
      root: ({ theme }) => ({ color: theme.vars.palette.text.secondary, fontSize: '0.875rem' }),
    },
  },
  MuiFormHelperText: { styleOverrides: { root: { marginLeft: 0, marginRight: 0, lineHeight: 1.4 } } },
};

const surfaces: ThemeOptions['components'] = {
  MuiPaper: {
    defaultProps: { elevation: 0, square: true },
    styleOverrides: { root: { backgroundImage: 'none' } },
  },
  MuiDialog: {
    styleOverrides: {
      /** Below the strip with the emergency stop, which stays above every dialog. */
      container: { paddingTop: '7.5rem' },
      paper: ({ theme }) => ({ border: `1px solid ${theme.vars.palette.text.primary}`, margin: 16 }),
    },
  },
  MuiMenu: {
    styleOverrides: { paper: ({ theme }) => ({ border: `1px solid ${theme.vars.palette.text.primary}` }) },
  },
  MuiTableCell: {
    styleOverrides: {
      root: ({ theme }) => ({ padding: '6px 10px', borderColor: theme.vars.palette.divider }),
      head: ({ theme }) => ({
        color: theme.vars.palette.text.secondary,
        fontSize: '0.75rem',
        fontWeight: 500,
        lineHeight: 1.3,
        borderBottomColor: theme.vars.palette.paper.outline,
        verticalAlign: 'bottom',
      }),
      body: { fontSize: '0.8125rem' },
    },
  },
  MuiTooltip: {
    styleOverrides: { tooltip: { borderRadius: 0, fontSize: '0.75rem' } },
  },
  MuiLink: { defaultProps: { underline: 'always', color: 'inherit' } },
};

export const componentStyles: ThemeOptions['components'] = {
  MuiCssBaseline: { styleOverrides: (theme) => globalStyles(theme) },
  ...buttons,
  ...fields,
  ...surfaces,
};
