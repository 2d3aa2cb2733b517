import { useColorScheme } from '@mui/material/styles';
import { papers, type Paper } from './papers.js';

/** The concrete colours in use, for canvases; elements style themselves by the theme's variables. */
export function usePaper(): Paper {
  const { colorScheme } = useColorScheme();
  return papers[colorScheme === 'dark' ? 'dark' : 'light'];
}
