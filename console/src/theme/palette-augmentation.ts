import type {} from '@mui/material/themeCssVarsAugmentation';
import type { Paper } from './papers.js';

declare module '@mui/material/styles' {
  interface Palette {
    paper: Paper;
  }
  interface PaletteOptions {
    paper?: Paper;
  }
}
