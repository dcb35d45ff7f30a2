import type { Talk } from '@shared/features/talks/talks.contract';
import type { AbstractInput } from '@shared/features/talks/talks-abstract.contract';
import type { Author } from './abstract-preview';

/** What the speaker writes, out of a talk. */
export const abstractOf = ({ title, abstract, coAuthors, msc, references, needs }: Talk): AbstractInput => ({
  title,
  abstract,
  coAuthors,
  msc,
  references,
  needs,
});

export const emptyAbstract: AbstractInput = {
  title: '',
  abstract: '',
  coAuthors: [],
  msc: [],
  references: [],
  needs: [],
};

/** Speakers first, then co-authors. */
export const authorsOf = (talk: Pick<Talk, 'people'>, draft: Pick<AbstractInput, 'coAuthors'>): Author[] => [
  ...talk.people
    .filter((person) => person.part === 'speaker')
    .map(({ printedName, affiliation }) => ({ name: printedName, affiliation })),
  ...draft.coAuthors,
];
