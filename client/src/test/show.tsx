import { MantineProvider } from '@mantine/core';
import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { render } from '@testing-library/react';
import type { ReactNode } from 'react';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';

/** A cache that never asks twice, so that a test sees each refusal once. */
export const quietClient = () =>
  new QueryClient({ defaultOptions: { queries: { retry: false, staleTime: Infinity }, mutations: { retry: false } } });

/** Shows a part of the page as the application would: with theme, cache and addresses. */
export function show(part: ReactNode, client = quietClient()) {
  const router = createMemoryRouter([{ path: '*', element: part }]);
  return render(
    <MantineProvider env="test">
      <QueryClientProvider client={client}>
        <RouterProvider router={router} />
      </QueryClientProvider>
    </MantineProvider>,
  );
}
