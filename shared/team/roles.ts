import { z } from 'zod';

/** The five roles, least first. Each includes the ones before it. */
export const ROLES = ['observer', 'operator', 'teacher', 'builder', 'owner'] as const;
export const Role = z.enum(ROLES);
export type Role = z.infer<typeof Role>;

/**
 * The one permission table: every act of the product and the least role that may do it.
 * HTTP routes, socket messages and the page's buttons all read this table and nothing else.
 */
export const PERMISSIONS = {
  'arm.watch': 'observer',
  'arm.stop': 'observer',
  'team.see': 'observer',
  'arm.control': 'operator',
  'sequence.run': 'operator',
  'pose.edit': 'teacher',
  'sequence.edit': 'teacher',
  'sequence.approve': 'teacher',
  'sequence.runUnapproved': 'teacher',
  'arm.build': 'builder',
  'fault.acknowledgeHard': 'builder',
  'control.force': 'owner',
  'arm.delete': 'owner',
  'arm.unattended': 'owner',
  'team.manage': 'owner',
  'outbox.see': 'owner',
  'audit.see': 'owner',
  'workshop.settings': 'owner',
} as const satisfies Record<string, Role>;
export type Permission = keyof typeof PERMISSIONS;

/** Whether `role` includes `least`. */
export function roleIncludes(role: Role, least: Role): boolean {
  return ROLES.indexOf(role) >= ROLES.indexOf(least);
}

/** Whether a person of this role may do this act. */
export function may(role: Role, permission: Permission): boolean {
  return roleIncludes(role, PERMISSIONS[permission]);
}
