import { Problem } from '@shared/http/problem';
import { toast } from '@/components/toast';

/** Field errors of a failed save, keyed by path; empty when it failed for another reason. */
export const fieldErrors = (error: unknown): Record<string, string> =>
  error instanceof Problem ? (error.fields ?? {}) : {};

/** The server's sentence. */
export const sentenceOf = (error: unknown): string =>
  error instanceof Problem ? error.message : 'Something went wrong. What you typed is still here.';

/** For actions without a form: says what did not happen. */
export function sayFailure(error: unknown): void {
  toast(sentenceOf(error), { kind: 'wrong' });
}
