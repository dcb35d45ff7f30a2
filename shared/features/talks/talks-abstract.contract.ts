import { z } from 'zod';
import { MAX_ABSTRACT } from '../../lib/latex';
import { roomFeature } from '../events/events.contract';
import { mscProblem, parseReference } from './subjects.rules';

export const talkTitle = z
  .string()
  .trim()
  .min(1, 'This is needed.')
  .max(300, 'At most 300 characters.')
  .regex(/^[^\n\r\0]*$/, 'No line breaks here.');
export const personName = z
  .string()
  .trim()
  .min(1, 'This is needed.')
  .max(120)
  .regex(/^[^\p{Cc}]*$/u, 'No line breaks here.');
export const talkMinutes = z
  .number()
  .int()
  .min(5, 'At least 5 minutes.')
  .max(600)
  .multipleOf(5, 'In steps of 5 minutes.');

/** MSC 2020 code; the first of a talk is its main one. */
export const mscCode = z
  .string()
  .trim()
  .superRefine((code, context) => {
    const problem = mscProblem(code);
    if (problem) context.addIssue({ code: 'custom', message: problem });
  });
/** DOI or arXiv identifier. */
export const reference = z
  .string()
  .trim()
  .max(200)
  .refine(
    (text) => parseReference(text) !== undefined,
    'This is neither a DOI (10.1000/xyz) nor an arXiv identifier (2101.01234).',
  );

export const coAuthor = z.strictObject({
  name: personName,
  affiliation: z.string().trim().max(200).default(''),
});

/** What its speaker writes. */
export const abstractInput = z.strictObject({
  /** LaTeX as in abstracts. */
  title: talkTitle,
  /** LaTeX. */
  abstract: z.string().max(MAX_ABSTRACT, `At most ${MAX_ABSTRACT} characters.`),
  coAuthors: z.array(coAuthor).max(20),
  msc: z.array(mscCode).max(4, 'At most 4 codes.'),
  references: z.array(reference).max(20),
  needs: z.array(roomFeature).max(10),
});
export type AbstractInput = z.infer<typeof abstractInput>;
