import { localStorageColorSchemeManager, MantineProvider } from '@mantine/core';
import { ModalsProvider } from '@mantine/modals';
import { Notifications } from '@mantine/notifications';
import { QueryClientProvider } from '@tanstack/react-query';
import { RouterProvider } from 'react-router-dom';
import { makeQueryClient } from '../lib/query-client.js';
import { makeRouter } from './routes.js';
import { cssVariables, theme } from './theme.js';

const queryClient = makeQueryClient();
const router = makeRouter(queryClient);
// public/scheme.js reads the same key before the first paint
const schemes = localStorageColorSchemeManager({ key: 'foreveil-scheme' });

export function App() {
  return (
    <MantineProvider theme={theme} cssVariablesResolver={cssVariables} colorSchemeManager={schemes} defaultColorScheme="auto">
      <QueryClientProvider client={queryClient}>
        <ModalsProvider modalProps={{ centered: true }} labels={{ confirm: 'Yes', cancel: 'No' }}>
          <Notifications position="bottom-right" autoClose={8000} />
          <RouterProvider router={router} />
        </ModalsProvider>
      </QueryClientProvider>
    </MantineProvider>
  );
}
