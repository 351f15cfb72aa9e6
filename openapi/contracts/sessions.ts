import { contract } from '@/openapi/contract';
import { InvitationAcceptance, SignIn, Whoami } from '@/openapi/schemas/access';

export const signIn = contract({
  id: 'signIn',
  method: 'post',
  path: '/sessions',
  tag: 'Access',
  summary: 'Sign in',
  description:
    'E-mail and password against a session cookie. Failed attempts are counted by account and by address.',
  access: 'public',
  body: { json: SignIn, limit: 4096 },
  answers: { 201: { description: 'Signed in; the cookie is HttpOnly.', json: Whoami } },
  problems: ['sign_in_failed', 'too_many_requests'],
});

export const signOut = contract({
  id: 'signOut',
  method: 'delete',
  path: '/sessions/current',
  tag: 'Access',
  summary: 'Sign out',
  description: 'Ends the session at once, on every device that holds its cookie.',
  access: 'signedIn',
  answers: { 204: { description: 'Signed out.' } },
});

export const acceptInvitation = contract({
  id: 'acceptInvitation',
  method: 'post',
  path: '/invitations/acceptances',
  tag: 'Access',
  summary: 'Accept an invitation',
  description: 'Sets the password of an invited person, ends their earlier sessions and signs in.',
  access: 'public',
  body: { json: InvitationAcceptance, limit: 4096 },
  answers: { 201: { description: 'Signed in; the cookie is HttpOnly.', json: Whoami } },
  problems: ['invitation_used', 'too_many_requests'],
});
