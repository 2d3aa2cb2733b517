import type { ReactNode } from 'react';
import CssBaseline from '@mui/material/CssBaseline';
import { ThemeProvider } from '@mui/material/styles';
import { QueryClientProvider, type QueryClient } from '@tanstack/react-query';
import { LiveProvider, type LiveHub } from '../live/index.js';
import { theme } from '../theme/index.js';

interface ProvidersProps {
  queryClient: QueryClient;
  hub: LiveHub;
  children: ReactNode;
}

export function Providers({ queryClient, hub, children }: ProvidersProps) {
  return (
    <ThemeProvider theme={theme} defaultMode="system">
      <CssBaseline enableColorScheme />
      <QueryClientProvider client={queryClient}>
        <LiveProvider hub={hub}>{children}</LiveProvider>
      </QueryClientProvider>
    </ThemeProvider>
  );
}
