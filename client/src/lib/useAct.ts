import { notifications } from '@mantine/notifications';
import { useMutation, useQueryClient, type QueryKey } from '@tanstack/react-query';

/** A change to the server: says that it was done, and asks anew for what it changed. */
export function useAct<T, A = void>(act: (given: A) => Promise<T>, { done, changes }: { done?: string; changes: readonly QueryKey[] }) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: act,
    onSettled: () => Promise.all(changes.map((queryKey) => client.invalidateQueries({ queryKey }))),
    onSuccess: () => {
      if (done) notifications.show({ message: done });
    },
  });
}
