import { QueryClientProvider } from '@tanstack/react-query';
import { StrictMode, useState } from 'react';
import { RouterProvider } from 'react-router-dom';
import { queryClient } from '../lib/query-client.ts';
import { createRouter } from './router.tsx';

/** The client: data, then places. */
export function App() {
  const [router] = useState(createRouter);
  return (
    <StrictMode>
      <QueryClientProvider client={queryClient}>
        <RouterProvider router={router} />
      </QueryClientProvider>
    </StrictMode>
  );
}
