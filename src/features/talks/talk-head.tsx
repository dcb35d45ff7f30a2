import type { Talk } from '@shared/features/talks/talks.contract';
import type { AbstractInput } from '@shared/features/talks/talks-abstract.contract';
import type { Stage } from '@shared/features/talks/talks-stay.contract';
import { owesAbstract, talkKindNames, talkStateNames } from '@shared/features/talks/talks.rules';
import { Button } from '@/components/button';
import { Input } from '@/components/field';
import { KindTag } from '@/components/kind-tag';
import { MathLine } from '@/components/math-text';
import { ownTime } from '@/lib/format';
import { sentenceOf } from '@/lib/problem';
import { CoAuthors } from './co-authors';
import { deadlineWords } from './deadline-words';
import { SaveLine } from './save-line';
import type { useHandIn } from './talks.queries';
import type { useAutosave } from './use-autosave';
import { WithdrawTalk } from './withdraw-talk';

interface Props {
  stage: Stage;
  talk: Talk;
  draft: Pick<
    ReturnType<typeof useAutosave<AbstractInput>>,
    'value' | 'state' | 'savedAt' | 'error' | 'flush'
  >;
  errors: Record<string, string>;
  handIn: ReturnType<typeof useHandIn>;
  onHandIn: () => void;
  onTitle: (title: string) => void;
  onCoAuthors: (coAuthors: AbstractInput['coAuthors']) => void;
}

/** What the talk is, its title, and the one action: hand the abstract in. */
export function TalkHead({ stage, talk, draft, errors, handIn, onHandIn, onTitle, onCoAuthors }: Props) {
  const owed = owesAbstract(talk.kind);
  return (
    <header className="grid gap-2">
      <div className="flex flex-wrap items-start justify-between gap-3">
        <div className="min-w-0">
          <p className="text-ink3">
            <KindTag kind={talk.kind} label={`${talkKindNames[talk.kind]}, ${talk.minutes} min`} />
            {talk.questionMinutes > 0 && <> of which {talk.questionMinutes} for questions</>}.{' '}
            {talkStateNames[talk.state]}.
          </p>
          <h1 className="font-serif text-title">
            <MathLine source={draft.value.title} />
          </h1>
        </div>
        <div className="flex flex-wrap items-center gap-3">
          <SaveLine
            state={draft.state}
            savedAt={draft.savedAt}
            error={draft.error}
            onRetry={() => void draft.flush()}
          />
          {talk.can.handIn && (
            <Button variant="primary" sizing="form" busy={handIn.isPending} onClick={onHandIn}>
              Hand in the abstract
            </Button>
          )}
        </div>
      </div>
      <Standing stage={stage} talk={talk} />
      {handIn.error && (
        <p role="alert" className="font-semibold text-alarm">
          Not handed in. {sentenceOf(handIn.error)}
        </p>
      )}
      {owed && talk.can.write && (
        <Input
          dense
          label="Title, LaTeX"
          value={draft.value.title}
          maxLength={300}
          error={errors.title}
          onChange={(event) => onTitle(event.target.value)}
        />
      )}
      <CoAuthors coAuthors={draft.value.coAuthors} disabled={!talk.can.write} onChange={onCoAuthors} />
      {talk.can.withdraw && <WithdrawTalk talk={talk} />}
    </header>
  );
}

/** Where the abstract stands, in a sentence. */
function Standing({ stage, talk }: { stage: Stage; talk: Talk }) {
  if (talk.state === 'withdrawn')
    return <p className="font-semibold">This talk is withdrawn. {talk.decisionNote}</p>;
  if (talk.state === 'declined')
    return <p className="font-semibold">This talk is declined. {talk.decisionNote}</p>;
  if (!owesAbstract(talk.kind)) return null;
  if (talk.abstractAt)
    return (
      <p className="text-good">
        ✓ Abstract handed in {ownTime(talk.abstractAt)}. You can still change it; every change is saved at
        once.
      </p>
    );
  const due = stage.deadlines.find((deadline) => deadline.kind === 'abstracts_due');
  return (
    <p className="text-ink2">
      The abstract is not handed in yet.{due && <> It is due {deadlineWords(due.at, stage.timeZone)}.</>}
    </p>
  );
}
