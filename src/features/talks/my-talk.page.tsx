import { useQuery } from '@tanstack/react-query';
import { useParams } from 'react-router-dom';
import { QueryView } from '@/components/states';
import { MyTalk } from './my-talk';
import { SpeakerFrame } from './speaker-frame';
import { talkQuery } from './talks.queries';

export function Component() {
  const { event = '', talk = '' } = useParams();
  // While somebody writes here, nothing is read anew under their hands.
  const query = useQuery({ ...talkQuery(event, talk), staleTime: Infinity });
  return (
    <SpeakerFrame event={event}>
      {(stage) => (
        <QueryView query={query} what="your talk">
          {(data) => <MyTalk key={data.id} stage={stage} talk={data} />}
        </QueryView>
      )}
    </SpeakerFrame>
  );
}
