import type { Role } from '#shared/permissions.ts';

/** The invented people of the demo, and what each will find to do. */
export const demoPeople: readonly { key: Role; email: string; displayName: string }[] = [
  { key: 'operator', email: 'tess.marlin@varrowhill.example', displayName: 'Tess Marlin' },
  { key: 'supervisor', email: 'owen.hadley@varrowhill.example', displayName: 'Owen Hadley' },
  { key: 'engineer', email: 'ines.quarrel@varrowhill.example', displayName: 'Ines Quarrel' },
  { key: 'lab', email: 's.brandt@pellam.example', displayName: 'S. Brandt' },
  { key: 'manager', email: 'ruth.calloway@varrowhill.example', displayName: 'Ruth Calloway' },
  { key: 'auditor', email: 'd.penrose@varrowhill.example', displayName: 'D. Penrose' },
  { key: 'admin', email: 'kit.lowden@varrowhill.example', displayName: 'Kit Lowden' },
];
