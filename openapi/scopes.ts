/** What an actor may do, in words: one list for roles and keys. */
export const SCOPES = {
  'projects:read': 'see projects, their units, tolerance classes, instruments and their tests',
  'projects:write': 'make and change projects, tolerance classes and instruments',
  'control:read': 'see control points, their history and the levelling between them',
  'control:write': 'bring in control, make new versions, mark points suspect or quarantined',
  'uploads:read': 'see what was sent in, byte for byte',
  'uploads:write': 'post observations',
  'setups:read': 'see setups and their statistics',
  'setups:write': 'refit setups',
  'setups:release': 'release setups to machines',
  'setups:withdraw': 'withdraw setups',
  'design:read': 'see surfaces and layers',
  'design:write': 'bring in surfaces and make layers',
  'grade:read': 'see grade checks, bench checks and summaries',
  'acknowledgements:read': 'see which withdrawals wait for an answer',
  'acknowledgements:write': 'answer a withdrawal for a machine',
  'adjustments:read': 'see network adjustments and compare their epochs',
  'adjustments:write': 'adjust networks; applying one to the control asks for control:write',
  'jobs:read': 'see work that takes longer, and how far it is',
  'jobs:write': 'cancel work that takes longer',
  'events:read': 'follow what happens',
  'webhooks:read': 'see webhook endpoints and their deliveries',
  'webhooks:write': 'make webhook endpoints, rotate their secrets, replay',
  'audit:read': 'see who did what',
  'keys:read': 'see API keys',
  'keys:write': 'make, rotate and revoke API keys',
  'people:read': 'see people and their roles',
  'people:write': 'invite people, change roles, close accounts',
} as const;

export type Scope = keyof typeof SCOPES;
export const SCOPE_NAMES = Object.keys(SCOPES) as [Scope, ...Scope[]];

export const ROLES = ['admin', 'surveyor', 'foreman', 'inspector', 'analyst'] as const;
export type Role = (typeof ROLES)[number];

const READS = SCOPE_NAMES.filter(
  (scope) =>
    scope.endsWith(':read') && !['keys:read', 'people:read', 'audit:read', 'webhooks:read'].includes(scope),
);

/** What each role may do. */
export const ROLE_SCOPES: Record<Role, readonly Scope[]> = {
  admin: SCOPE_NAMES,
  surveyor: [
    ...READS,
    ...(['projects:write', 'control:write', 'uploads:write', 'setups:write', 'setups:release'] as const),
    ...(['setups:withdraw', 'design:write', 'acknowledgements:write', 'people:read', 'audit:read'] as const),
    ...(['adjustments:write', 'jobs:write'] as const),
  ],
  foreman: [...READS, 'acknowledgements:write'],
  inspector: [...READS, 'uploads:write', 'setups:withdraw', 'people:read', 'audit:read'],
  analyst: READS,
};
