import '@fontsource/jetbrains-mono/400.css';
import '@fontsource/jetbrains-mono/500.css';
import '@fontsource/jetbrains-mono/600.css';
import './components/look/index.css';
import { QueryClientProvider } from '@tanstack/react-query';
import { StrictMode } from 'react';
import { createRoot } from 'react-dom/client';
import { RouterProvider } from 'react-router-dom';
import { Toaster } from 'sonner';
import { queryClient } from './api/query-client';
import { applyTheme } from './components/theme';
import { router } from './router';

applyTheme();
const root = document.getElementById('root');
if (!root) throw new Error('the page has no root');
createRoot(root).render(
  <StrictMode>
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
      <Toaster
        position="bottom-left"
        // Above the status strip and the run bar: nothing that stops or runs the arm is covered.
        offset={{ bottom: 196 }}
        mobileOffset={{ bottom: 220 }}
        duration={6000}
      />
    </QueryClientProvider>
  </StrictMode>,
);
