import { useParams } from 'react-router-dom';
import { formatDateSpan } from '@shared/lib/time';
import { PresenceForm } from './presence-form';
import { SpeakerFrame } from './speaker-frame';

export function Component() {
  const { event = '' } = useParams();
  return (
    <SpeakerFrame event={event}>
      {(stage) => (
        <div className="mx-auto max-w-[680px] px-4 py-8 text-form">
          <h1 className="font-serif text-page">When you are in {stage.town}</h1>
          <p className="mt-1 mb-6 text-ink2">
            {stage.title}, {formatDateSpan(stage.startsOn, stage.endsOn)}. Your talk is placed within this
            window. Only the organisers see it.
          </p>
          <PresenceForm key={stage.slug} stage={stage} />
        </div>
      )}
    </SpeakerFrame>
  );
}
