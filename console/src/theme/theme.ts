import { createTheme } from '@mui/material/styles';
import { componentStyles } from './component-styles.js';
import { papers, type Paper } from './papers.js';

export const fontFamily = '"Roboto Mono", ui-monospace, monospace';

function paletteOf(paper: Paper) {
  const solid = (main: string) => ({ main, light: main, dark: main, contrastText: paper.sheet });
  return {
    primary: solid(paper.ink),
    secondary: solid(paper.inkSoft),
    // A fault in a form is a warning: red is kept for trips and the emergency stop.
    error: solid(paper.warn),
    warning: solid(paper.warn),
    info: solid(paper.act),
    success: solid(paper.ink),
    text: { primary: paper.ink, secondary: paper.inkSoft, disabled: paper.inkSoft },
    divider: paper.rule,
    background: { default: paper.ground, paper: paper.sheet },
    action: { hover: paper.shade, selected: paper.shade, disabled: paper.inkSoft, hoverOpacity: 0.06 },
    paper,
  };
}

/** Chart paper by day, a dark room by night; follows the system until the switch is used. */
export const theme = createTheme({
  cssVariables: { colorSchemeSelector: 'data-scheme', cssVarPrefix: 'ch' },
  colorSchemes: {
    light: { palette: paletteOf(papers.light) },
    dark: { palette: paletteOf(papers.dark) },
  },
  shape: { borderRadius: 0 },
  spacing: 8,
  typography: {
    fontFamily,
    fontSize: 14,
    h1: { fontSize: '1.375rem', fontWeight: 700, lineHeight: 1.25, letterSpacing: '-0.01em' },
    h2: { fontSize: '0.8125rem', fontWeight: 700, lineHeight: 1.4, letterSpacing: '0.06em' },
    h3: { fontSize: '0.875rem', fontWeight: 700, lineHeight: 1.4 },
    body1: { fontSize: '0.875rem', lineHeight: 1.5 },
    body2: { fontSize: '0.8125rem', lineHeight: 1.5 },
    caption: { fontSize: '0.75rem', lineHeight: 1.45 },
    button: { fontSize: '0.8125rem', fontWeight: 500, textTransform: 'none', letterSpacing: 0 },
  },
  components: componentStyles,
});
