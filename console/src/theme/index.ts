export { papers, traceColour, type Paper, type SchemeName } from './papers.js';
export { fontFamily, theme } from './theme.js';
export { usePaper } from './use-paper.js';
