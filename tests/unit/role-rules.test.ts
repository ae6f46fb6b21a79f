import { describe, expect, it } from 'vitest';
import type { Person } from '../../shared/api/resources';
import { ROLES, type Role } from '../../shared/team/roles';
import { whyNotDisable, whyNotRole } from '../../src/features/team/role-rules';

const person = (name: string, role: Role, disabled = false): Person => ({
  id: name.toLowerCase(),
  name,
  email: `${name.toLowerCase()}@tidemill.example`,
  role,
  disabled,
  lastSeenMs: null,
});
const ada = person('Ada', 'owner');
const moss = person('Moss', 'builder');
const otis = person('Otis', 'observer');

describe('roles that can be given', () => {
  it('are all of them for anybody but the only owner', () => {
    for (const role of ROLES) expect(whyNotRole(moss, role, [ada, moss, otis])).toBeNull();
  });

  it('leave the only owner an owner, and say what to do first', () => {
    const team = [ada, moss, otis];
    for (const role of ROLES.filter((r) => r !== 'owner'))
      expect(whyNotRole(ada, role, team)).toMatch(/Ada is the only owner.*somebody else/);
    expect(whyNotRole(ada, 'owner', team)).toBeNull();
  });

  it('are free again with a second owner', () => {
    expect(whyNotRole(ada, 'teacher', [ada, person('Ines', 'owner')])).toBeNull();
  });

  it('do not count an owner who is disabled', () => {
    expect(whyNotRole(ada, 'teacher', [ada, person('Ines', 'owner', true)])).toMatch(/only owner/);
  });
});

describe('who can be disabled', () => {
  it('is everybody else', () => {
    expect(whyNotDisable(otis, [ada, otis], ada.id)).toBeNull();
  });

  it('is never oneself, even with a second owner', () => {
    expect(whyNotDisable(ada, [ada, person('Ines', 'owner')], ada.id)).toMatch(/Another owner/);
  });

  it('is never the only owner', () => {
    expect(whyNotDisable(ada, [ada, moss], moss.id)).toMatch(/only owner/);
  });
});
