import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import type { Talk } from '@shared/features/talks/talks.contract';
import { downloadMaterial } from '@shared/features/talks/talks-materials.contract';
import { owesAbstract, talkKindNames, talkStateNames } from '@shared/features/talks/talks.rules';
import { Button, LinkButton } from '@/components/button';
import { KindTag } from '@/components/kind-tag';
import { Facts, SectionHead } from '@/components/page-bar';
import { QueryView } from '@/components/states';
import { fileAddress } from '@/lib/api';
import { formatBytes, ownTime } from '@/lib/format';
import { authorsOf } from './abstract-fields';
import { Printed } from './abstract-preview';
import { DecisionButtons } from './decision-buttons';
import { MaterialAccess } from './material-access';
import { materialNames } from './material-words';
import { featureNames } from './needs-list';
import { TalkDialog } from './talk-dialog';
import { talkQuery } from './talks.queries';
import { WithdrawTalk } from './withdraw-talk';

export function TalkRecord({
  event,
  talkId,
  onClose,
}: {
  event: string;
  talkId: string;
  onClose: () => void;
}) {
  const query = useQuery(talkQuery(event, talkId));
  return (
    <>
      <Button className="mb-3 lg:hidden" onClick={onClose}>
        Back to the list
      </Button>
      <QueryView query={query} what="the talk">
        {(talk) => <Record talk={talk} />}
      </QueryView>
    </>
  );
}

const partWords = { speaker: 'Speaker', chair: 'Chair', tutor: 'Tutor' } as const;
const invitationWords = {
  invited: 'Invited, no answer yet',
  accepted: 'Invitation accepted',
  declined: 'Invitation declined',
} as const;

function Record({ talk }: { talk: Talk }) {
  const [editing, setEditing] = useState(false);
  return (
    <div className="grid gap-5">
      <div className="flex flex-wrap items-center justify-between gap-2">
        <KindTag kind={talk.kind} label={talkKindNames[talk.kind]} />
        <b className="font-semibold">{talkStateNames[talk.state]}</b>
      </div>
      <DecisionButtons talk={talk} />
      <Printed level={2} {...talk} authors={authorsOf(talk, talk)} />
      <div className="flex flex-wrap gap-2">
        {talk.can.edit && <Button onClick={() => setEditing(true)}>Change kind and people …</Button>}
        {talk.can.write && owesAbstract(talk.kind) && (
          <LinkButton to={`/events/${talk.eventSlug}/my-talks/${talk.id}`}>Write the abstract</LinkButton>
        )}
        {talk.can.upload && !owesAbstract(talk.kind) && (
          <LinkButton to={`/events/${talk.eventSlug}/my-talks/${talk.id}`}>Upload files</LinkButton>
        )}
      </div>
      <section className="border-t border-ink pt-2">
        <Facts
          items={[
            ['Length', `${talk.minutes} minutes, ${talk.questionMinutes} for questions`],
            talk.invitation !== null && ['Invitation', invitationWords[talk.invitation]],
            owesAbstract(talk.kind) && [
              'Abstract',
              talk.abstractAt ? `handed in ${ownTime(talk.abstractAt)}` : 'not handed in',
            ],
            ...talk.people.map(
              (person) =>
                [
                  partWords[person.part],
                  [person.printedName, person.affiliation].filter(Boolean).join(', '),
                ] as const,
            ),
            [
              'Needs',
              talk.needs.map((need) => featureNames[need].offer.toLowerCase()).join(', ') ||
                'nothing special',
            ],
            ['Expected', talk.expectedAudience ? `${talk.expectedAudience} people` : 'not known'],
            ['Recording', talk.recordingConsent ? 'the speaker has agreed' : 'no consent'],
            talk.decisionNote !== '' && ['Note', talk.decisionNote],
          ]}
        />
      </section>
      <Files talk={talk} />
      {talk.can.withdraw && <WithdrawTalk talk={talk} />}
      {editing && (
        <TalkDialog
          event={talk.eventSlug}
          talk={talk}
          onClose={() => setEditing(false)}
          onDone={() => undefined}
        />
      )}
    </div>
  );
}

function Files({ talk }: { talk: Talk }) {
  return (
    <section>
      <SectionHead title="Files" />
      {talk.materials.length === 0 && (
        <p className="border-t border-ink pt-2 text-dense text-ink3">Nothing uploaded yet.</p>
      )}
      {talk.materials.map((material) => {
        const newest = material.versions[0];
        return (
          <div key={material.id} className="border-t border-rule py-2 text-dense">
            <b className="font-semibold">{materialNames[material.kind].title}</b>
            {newest && (
              <p>
                <a
                  className="break-all"
                  href={fileAddress(downloadMaterial, { event: talk.eventSlug, file: newest.id })}
                >
                  {newest.fileName}
                </a>{' '}
                <span className="text-ink3">
                  version {newest.number}, {formatBytes(newest.bytes)}, {ownTime(newest.uploadedAt)}
                </span>
              </p>
            )}
            {talk.can.upload && <MaterialAccess key={material.version} talk={talk} material={material} />}
          </div>
        );
      })}
    </section>
  );
}
