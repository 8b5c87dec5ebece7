import {
  apiPaths,
  type AccessToken,
  type Account,
  type AccountPage,
  type InvitationLook,
  type MailChoices,
  type MailState,
  type Me,
  type ReceivedMail,
  type ReceivedMailSummary,
  type Session,
  type SignIn,
} from '@foreveil/shared';
import { queryOptions } from '@tanstack/react-query';
import { http } from '../http.js';

export const accountQueries = {
  /** who is signed in; a 401 is an answer here, not a reason to ask */
  me: () =>
    queryOptions({
      queryKey: ['me'] as const,
      queryFn: ({ signal }) => http.get<Me>(apiPaths.me, { signal, quiet: true }),
      staleTime: 5 * 60_000,
    }),
  account: () => queryOptions({ queryKey: ['account'] as const, queryFn: ({ signal }) => http.get<Account>(apiPaths.account, { signal }) }),
  sessions: () =>
    queryOptions({
      queryKey: ['account', 'sessions'] as const,
      queryFn: ({ signal }) => http.get<Session[]>(apiPaths.sessions, { signal }),
    }),
  tokens: () =>
    queryOptions({
      queryKey: ['account', 'tokens'] as const,
      queryFn: ({ signal }) => http.get<AccessToken[]>(apiPaths.accessTokens, { signal }),
    }),
  mailChoices: () =>
    queryOptions({
      queryKey: ['account', 'mail'] as const,
      queryFn: ({ signal }) => http.get<MailChoices>(apiPaths.mailChoices, { signal }),
    }),
  invitation: (secret: string) =>
    queryOptions({
      queryKey: ['invitation', secret] as const,
      queryFn: () => http.post<InvitationLook>(apiPaths.lookAtInvitation, { secret }, { quiet: true }),
      staleTime: Infinity,
    }),
  received: () =>
    queryOptions({
      queryKey: ['received-mail'] as const,
      queryFn: ({ signal }) => http.get<ReceivedMailSummary[]>(apiPaths.receivedMails, { signal, quiet: true }),
      refetchInterval: 3_000,
    }),
  receivedMail: (id: string) =>
    queryOptions({
      queryKey: ['received-mail', id] as const,
      queryFn: ({ signal }) => http.get<ReceivedMail>(apiPaths.receivedMail(id), { signal, quiet: true }),
      staleTime: Infinity,
    }),
  accounts: (find: string) =>
    queryOptions({
      queryKey: ['admin', 'accounts', find] as const,
      queryFn: ({ signal }) => http.get<AccountPage>(`${apiPaths.adminAccounts}?find=${encodeURIComponent(find)}`, { signal }),
    }),
  outbox: () =>
    queryOptions({ queryKey: ['admin', 'mail'] as const, queryFn: ({ signal }) => http.get<MailState>(apiPaths.adminMail, { signal }) }),
};

export const signIn = (who: SignIn) => http.post<Me>(apiPaths.signIn, who, { quiet: true });
export const signOut = () => http.post<void>(apiPaths.signOut, undefined, { quiet: true });
