import { StrictMode } from 'react';
import { createRoot } from 'react-dom/client';
import { createBrowserRouter, RouterProvider } from 'react-router-dom';
import '@fontsource/roboto-mono/400.css';
import '@fontsource/roboto-mono/500.css';
import '@fontsource/roboto-mono/700.css';
import { createQueryClient } from './api/index.js';
import { Providers } from './app/providers.js';
import { routes } from './app/routes.js';
import { createBrowserHub } from './live/index.js';

const root = document.getElementById('root');
if (!root) throw new Error('The page has no element "root" to draw in.');

createRoot(root).render(
  <StrictMode>
    <Providers queryClient={createQueryClient()} hub={createBrowserHub()}>
      <RouterProvider router={createBrowserRouter(routes)} />
    </Providers>
  </StrictMode>,
);
