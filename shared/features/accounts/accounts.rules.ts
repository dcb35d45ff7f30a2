import type { CareerStage, Role, Scope } from './accounts.contract';
import { foldCase } from '../../lib/text';

/** Roles that may be granted in each scope (product roles speaker, chair and participant follow from talks and registrations). */
export const rolesIn: Record<Scope, readonly Role[]> = {
  institute: ['administrator', 'finance'],
  event: ['organiser', 'reviewer', 'desk'],
  fund: ['funder'],
};

export const roleNames: Record<Role, string> = {
  administrator: 'Administrator',
  finance: 'Finance officer',
  organiser: 'Organiser',
  reviewer: 'Reviewer',
  desk: 'Desk helper',
  funder: 'Funder',
};

export const careerStageNames: Record<CareerStage, string> = {
  student: 'Student',
  doctoral: 'Doctoral student',
  postdoc: 'Postdoc',
  faculty: 'Faculty',
  industry: 'Industry',
  other: 'Other',
};

export const roleFitsScope = (role: Role, scope: Scope): boolean => rolesIn[scope].includes(role);

/** Long passwords that are tried first everywhere (a short list from memory; shorter ones fail the length already). */
const COMMON = new Set([
  'passwordpassword',
  'password1234',
  'password12345',
  'password123456',
  'passw0rd1234',
  'p@ssw0rd1234',
  'qwertyuiopas',
  'qwertyuiop12',
  'qwertyuiop123',
  'qwerty123456',
  'qwertyqwerty',
  'asdfghjkl123',
  'zxcvbnm12345',
  '1q2w3e4r5t6y',
  '1qaz2wsx3edc',
  'q1w2e3r4t5y6',
  'abcdefghijkl',
  'abc123abc123',
  'iloveyou1234',
  'iloveyouforever',
  'letmeinletmein',
  'letmein12345',
  'welcome12345',
  'welcome123456',
  'admin1234567',
  'adminadminadmin',
  'administrator',
  'changeme1234',
  'changemechangeme',
  'football1234',
  'sunshine1234',
  'princess1234',
  'trustno1trustno1',
  'superman1234',
  'monkey123456',
  'dragon123456',
  'master123456',
  'correcthorsebatterystaple',
  'mathematics1',
  'mathematics123',
  'mathematician',
  'summerschool',
  'summerschool2026',
  'conference2026',
]);

/**
 * Why a password is refused, in a sentence; undefined when it is fine. Length is the contract's matter; here: common
 * passwords, one character or a run repeated, and passwords that are little more than the person's own address or name.
 */
export function passwordRefusal(
  password: string,
  person: { email: string; name: string },
): string | undefined {
  const folded = foldCase(password);
  if (COMMON.has(folded)) return 'This password is among the first that are tried. Choose another.';
  if (new Set(folded).size < 5) return 'This password repeats a few characters only. Choose another.';
  if (isRun(folded)) return 'This password is a run of neighbouring characters. Choose another.';
  const own = [person.email, person.email.split('@')[0] ?? '', ...person.name.split(/\s+/)].map(foldCase);
  const rest = own
    .filter((word) => word.length >= 4)
    .reduce((text, word) => text.split(word).join(''), folded);
  if (rest.length < 6 && rest.length < folded.length)
    return 'This password is little more than your name or address. Choose another.';
  return undefined;
}

function isRun(text: string): boolean {
  let neighbours = 0;
  for (let i = 1; i < text.length; i++)
    if (Math.abs(text.charCodeAt(i) - text.charCodeAt(i - 1)) === 1) neighbours++;
  return neighbours >= text.length - 3;
}
