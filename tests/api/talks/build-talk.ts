import * as contract from '../../../shared/features/talks/talks.contract';
import type { Client, TestApp } from '../../support/server';
import { buildAccount } from '../../support/build';

export const abstract = {
  title: 'Lattices that pack badly',
  abstract: 'We show $\\Delta \\le 2^{-n}$.',
  coAuthors: [],
  msc: ['52C17'],
  references: ['10.1000/xyz123'],
  needs: [],
};
export const pdf = Buffer.from('%PDF-1.4\n1 0 obj\n<<>>\nendobj\ntrailer\n<<>>\n%%EOF\n');
export const problemOf = (answer: { body: unknown }) =>
  answer.body as { detail: string; code: string; fields?: Record<string, string> };

/** A speaker with a submitted talk. */
export async function submitted(
  t: TestApp,
  event: string,
): Promise<{ speaker: Client; email: string; talk: string; version: number }> {
  const account = await buildAccount();
  const speaker = await t.signIn(account);
  const { body } = await speaker.call(contract.submitTalk, { params: { event }, body: abstract });
  return { speaker, email: account.email, talk: body.id, version: body.version };
}
