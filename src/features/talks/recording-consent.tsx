import { useState } from 'react';
import type { Talk } from '@shared/features/talks/talks.contract';
import { Checkbox } from '@/components/field';
import { sayFailure } from '@/lib/problem';
import { useConsent } from './talks.queries';

/** Consent is the speaker's own, given here and withdrawn here. */
export function RecordingConsent({ talk, own }: { talk: Talk; own: boolean }) {
  const consent = useConsent();
  // The tick follows the hand at once; a refusal takes it back.
  const [wanted, setWanted] = useState(talk.recordingConsent);
  if (!own)
    return (
      <p className="text-dense text-ink2">
        Recording: {talk.recordingConsent ? 'the speaker has agreed.' : 'no consent of the speaker.'}
      </p>
    );
  return (
    <Checkbox
      label="May be recorded"
      hint="I agree that this talk is recorded and the recording is shown on the event’s pages. I can withdraw this here at any time; the recording is then taken down."
      checked={wanted}
      onChange={(event) => {
        const agrees = event.target.checked;
        setWanted(agrees);
        consent.mutate(
          { talk, consent: agrees },
          {
            onError: (error) => {
              setWanted(!agrees);
              sayFailure(error);
            },
          },
        );
      }}
    />
  );
}
