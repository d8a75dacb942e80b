import './lib/theme-early.ts';
import './styles.css';
import { QueryClientProvider } from '@tanstack/react-query';
import { StrictMode } from 'react';
import { createRoot } from 'react-dom/client';
import { RouterProvider } from 'react-router-dom';
import { makeQueryClient } from './api/query-client.ts';
import { router } from './router.tsx';

const root = document.getElementById('root');
if (root === null) throw new Error('index.html has no element #root');

createRoot(root).render(
  <StrictMode>
    <QueryClientProvider client={makeQueryClient()}>
      <RouterProvider router={router} />
    </QueryClientProvider>
  </StrictMode>,
);
