import type { Actor } from '@server/http/authorize';
import { transaction } from '@server/db/transaction';
import { hashPassword } from '@server/features/accounts/accounts-sign-in.service';
import { AccountRow } from '@server/features/accounts/accounts.model';
import {
  ensureAccountForEmail,
  grantRole,
  systemActor,
  type PersonView,
} from '@server/features/accounts/accounts.service';
import { demoAccounts, demoPassword } from './demo-accounts';
import { people } from './pools';

export interface Cast {
  /** By role, as on the sign-in page. */
  by: Record<(typeof demoAccounts)[number]['role'], PersonView>;
  /** Everybody else. */
  crowd: PersonView[];
}

const names: Record<string, [given: string, family: string, affiliation: string]> = {
  administrator: ['Maren', 'Ashgrove-Lie', 'Tarnholt Institute for Mathematics'],
  finance: ['Holger', 'Skovdal', 'Tarnholt Institute for Mathematics'],
  organiser: ['Ingrid', 'Vestervang', 'Tarnholt Institute for Mathematics'],
  reviewer: ['Ümit', 'Yıldızeli', 'Gökova Üniversitesi'],
  speaker: ['Ngô', 'Đình Khôi', 'Viện Toán Sông Hồng'],
  chair: ['Inês', 'Carvalhal', 'Univ. Serra Clara'],
  participant: ['Tamar', 'Kvaratskheli', 'Rioni University'],
  funder: ['Ragnhild', 'Halvardsen', 'Ness Bequest'],
  desk: ['Jonas', 'Brinkmose', 'Tarnholt Institute for Mathematics'],
};
const stages = ['doctoral', 'postdoc', 'student', 'faculty', 'doctoral', 'postdoc'] as const;

/** The office, one demo account for each role, and the crowd. One hash for all: the password is the same. */
export async function seedAccounts(scale: number): Promise<Cast> {
  const passwordHash = await hashPassword(demoPassword);
  const by = {} as Cast['by'];
  for (const { role, email } of demoAccounts) {
    const [givenName, familyName, affiliation] = names[role] as [string, string, string];
    by[role] = await ensureAccountForEmail({
      email,
      givenName,
      familyName,
      affiliation,
      country: 'DK',
      careerStage: role === 'participant' ? 'doctoral' : 'faculty',
      timeZone: 'Europe/Copenhagen',
    });
    await transaction(() =>
      AccountRow.update({ passwordHash, emailVerifiedAt: new Date() }, { where: { id: by[role].id } }),
    );
  }
  await transaction(async () => {
    await grantRole({
      accountId: by.administrator.id,
      role: 'administrator',
      scope: 'institute',
      scopeId: null,
      by: systemActor,
    });
    await grantRole({
      accountId: by.finance.id,
      role: 'finance',
      scope: 'institute',
      scopeId: null,
      by: systemActor,
    });
  });
  const crowd: PersonView[] = [];
  await transaction(async () => {
    for (const [index, seed] of people(190 * scale).entries()) {
      const person = await ensureAccountForEmail({
        email: `person${index + 1}@example.org`,
        givenName: seed.given,
        familyName: seed.family,
        affiliation: seed.affiliation,
        country: seed.country,
        careerStage: stages[index % stages.length],
        timeZone: seed.zone,
      });
      await AccountRow.update({ passwordHash, emailVerifiedAt: new Date() }, { where: { id: person.id } });
      crowd.push(person);
    }
  });
  return { by, crowd };
}

/** Somebody acts for himself or herself. */
export const as = (person: PersonView): Actor => ({
  accountId: person.id,
  email: person.email,
  printedName: person.printedName,
  grants: [],
});
