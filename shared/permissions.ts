/** The roles of the people who work with the record. */
export const roles = ['operator', 'supervisor', 'engineer', 'lab', 'manager', 'auditor', 'admin'] as const;
export type Role = (typeof roles)[number];

export const roleNames: Record<Role, string> = {
  operator: 'operator',
  supervisor: 'plant supervisor',
  engineer: 'environmental engineer',
  lab: 'laboratory',
  manager: 'site manager',
  auditor: 'auditor',
  admin: 'administrator',
};

const everyoneOnSite: Role[] = ['operator', 'supervisor', 'engineer', 'manager', 'auditor', 'admin'];

/** Who may do what at a site. Routes and screens read this one table. */
export const permissionTable = {
  'read:site': [...everyoneOnSite, 'lab'],
  'read:record': everyoneOnSite,
  'read:lab': [...everyoneOnSite, 'lab'],
  'read:trail': ['supervisor', 'engineer', 'manager', 'auditor', 'admin'],
  'read:people': ['manager', 'auditor', 'admin'],
  'create:reading': ['operator', 'supervisor', 'engineer'],
  'settle:reading': ['supervisor', 'engineer'],
  'change:site': ['engineer', 'admin'],
  'create:site': ['engineer', 'admin'],
  'import:climate': ['engineer'],
  'change:parameters': ['engineer'],
  'freeze:run': ['engineer'],
  'note:comparison': ['engineer'],
  'run:forecast': ['engineer', 'manager', 'supervisor'],
  'upload:results': ['lab', 'supervisor', 'engineer'],
  'change:permit': ['engineer'],
  'confirm:limit': ['manager'],
  'follow:exceedance': ['engineer', 'manager', 'supervisor'],
  'close:month': ['engineer'],
  'reopen:month': ['manager'],
  'sign:report': ['manager'],
  'manage:people': ['admin'],
} as const satisfies Record<string, readonly Role[]>;

export type Permission = keyof typeof permissionTable;

/** True when one of the roles may do it. */
export function isAllowed(held: readonly Role[], permission: Permission): boolean {
  const allowed: readonly Role[] = permissionTable[permission];
  return held.some((role) => allowed.includes(role));
}
