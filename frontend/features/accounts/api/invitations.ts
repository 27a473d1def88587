import { queryOptions } from '@tanstack/react-query';
import type { InvitedPersonDto } from '#schemas/api/people.ts';
import { api } from '#frontend/lib/api.ts';

const post = async <T>(path: string, body: object): Promise<T> =>
  (await api<T>(path, { method: 'POST', body })).data;

/** Whom an invitation is for. The token goes in the body: an address would be logged on the way. */
export const invitedPersonQuery = (token: string) =>
  queryOptions({
    queryKey: ['invitation', token],
    queryFn: () => post<InvitedPersonDto>('/invitations/look-up', { token }),
    retry: false,
    staleTime: Infinity,
  });

export const acceptInvitation = (token: string, password: string) =>
  post<undefined>('/invitations/acceptance', { token, password, acceptDeclaration: true });

export const askForPasswordReset = (email: string) => post<undefined>('/password-resets', { email });

export const completePasswordReset = (token: string, password: string) =>
  post<undefined>('/password-resets/completion', { token, password });
