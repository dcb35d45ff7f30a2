import type { Talk } from '@shared/features/talks/talks.contract';
import type { AbstractInput } from '@shared/features/talks/talks-abstract.contract';
import type { Stage } from '@shared/features/talks/talks-stay.contract';
import { owesAbstract } from '@shared/features/talks/talks.rules';
import { useAccount } from '@/features/accounts/accounts.queries';
import { SectionHead } from '@/components/page-bar';
import { fieldErrors } from '@/lib/problem';
import { abstractOf, authorsOf } from './abstract-fields';
import { PreviewPane } from './abstract-preview';
import { AbstractSource } from './abstract-source';
import { MaterialsPanel } from './materials-panel';
import { wantedBy } from './deadline-words';
import { NeedsList, RoomsTable } from './needs-list';
import { PresenceForm } from './presence-form';
import { RecordingConsent } from './recording-consent';
import { ReferencesField } from './references-field';
import { StaleNote } from './save-line';
import { SubjectsField } from './subjects-field';
import { TalkHead } from './talk-head';
import { useAbstractSaver, useHandIn } from './talks.queries';
import { useAbstractProblems } from './use-abstract-problems';
import { useAutosave } from './use-autosave';

/** The speaker's page: source and print side by side, subjects and slides below, the stay and the rooms on the right. */
export function MyTalk({ stage, talk }: { stage: Stage; talk: Talk }) {
  const account = useAccount();
  const saver = useAbstractSaver(talk.eventSlug, talk.id);
  const handIn = useHandIn();
  const draft = useAutosave<AbstractInput>({
    initial: abstractOf(talk),
    version: talk.version,
    save: saver.save,
    reload: async () => {
      const fresh = await saver.reload();
      return { value: abstractOf(fresh), version: fresh.version };
    },
  });
  const value = draft.value;
  const set = (part: Partial<AbstractInput>) => draft.change({ ...value, ...part });
  const { problems, marks } = useAbstractProblems(value.abstract);
  const errors = {
    ...fieldErrors(draft.error),
    ...(draft.state === 'saved' ? fieldErrors(handIn.error) : {}),
  };
  const own = talk.people.some((person) => person.accountId === account?.id);
  const locked = !talk.can.write;
  const send = async () => {
    if (!(await draft.flush())) return;
    const fresh = await saver.reload();
    handIn.mutate(fresh, { onSuccess: (next) => draft.setVersion(next.version) });
  };
  return (
    <div className="grid grid-cols-[minmax(0,1fr)_344px] max-lg:grid-cols-1">
      <div className="min-w-0 p-6 max-sm:p-4">
        <TalkHead
          stage={stage}
          talk={talk}
          draft={draft}
          errors={errors}
          onHandIn={() => void send()}
          handIn={handIn}
          onTitle={(title) => set({ title })}
          onCoAuthors={(coAuthors) => set({ coAuthors })}
        />
        {draft.state === 'stale' && (
          <StaleNote
            what="this abstract"
            onMine={() => void draft.resolve('mine')}
            onTheirs={() => void draft.resolve('theirs')}
          />
        )}
        {owesAbstract(talk.kind) && (
          <>
            <div className="mt-4 grid gap-6 xl:grid-cols-2">
              <AbstractSource
                value={value.abstract}
                marks={marks}
                problems={problems}
                disabled={locked}
                error={errors.abstract}
                onChange={(abstract) => set({ abstract })}
              />
              <PreviewPane {...value} authors={authorsOf(talk, value)} />
            </div>
            <div className="mt-6 grid gap-6 xl:grid-cols-2">
              <div className="grid content-start gap-6">
                <SubjectsField
                  codes={value.msc}
                  disabled={locked}
                  error={errors.msc}
                  onChange={(msc) => set({ msc })}
                />
                <ReferencesField
                  references={value.references}
                  disabled={locked}
                  onChange={(references) => set({ references })}
                />
              </div>
              <Materials stage={stage} talk={talk} />
            </div>
          </>
        )}
        {!owesAbstract(talk.kind) && (
          <div className="mt-4">
            <Materials stage={stage} talk={talk} />
          </div>
        )}
      </div>
      <aside
        aria-label="Stay, rooms and needs"
        className="grid content-start gap-7 border-l border-rule bg-paper p-6 max-lg:border-t max-lg:border-l-0 max-sm:p-4"
      >
        {own && (
          <section>
            <SectionHead title={`When you are in ${stage.town}`} />
            <PresenceForm stage={stage} compact />
          </section>
        )}
        <RoomsTable rooms={stage.rooms} needs={value.needs} />
        <NeedsList needs={value.needs} disabled={locked} onChange={(needs) => set({ needs })} />
        <RecordingConsent
          talk={talk}
          own={
            own && talk.people.some((person) => person.accountId === account?.id && person.part === 'speaker')
          }
        />
      </aside>
    </div>
  );
}

function Materials({ stage, talk }: { stage: Stage; talk: Talk }) {
  const teaches = talk.kind === 'course_lecture' || talk.kind === 'exercise';
  return (
    <div className="grid content-start gap-6">
      {talk.kind !== 'exercise' && (
        <MaterialsPanel talk={talk} kind="slides" wantedBy={wantedBy(stage, 'slides_due')} />
      )}
      {(teaches || talk.materials.some((entry) => entry.kind === 'notes')) && (
        <MaterialsPanel talk={talk} kind="notes" />
      )}
      {(teaches || talk.materials.some((entry) => entry.kind === 'problems')) && (
        <MaterialsPanel talk={talk} kind="problems" />
      )}
    </div>
  );
}
