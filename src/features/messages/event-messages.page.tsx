import { useState } from 'react';
import { useParams, useSearchParams } from 'react-router-dom';
import { Button } from '@/components/button';
import { Segmented } from '@/components/field';
import { PageBar } from '@/components/page-bar';
import { AnswersTable } from './answers-table';
import { LetterDialog } from './letter-dialog';
import { MessageList } from './message-list';

export function Component() {
  const { event = '' } = useParams();
  const [search, setSearch] = useSearchParams();
  const [writing, setWriting] = useState(false);
  const view = search.get('view') === 'answers' ? 'answers' : 'sent';
  return (
    <>
      <PageBar
        title="Messages"
        controls={
          <Segmented
            label="What is shown"
            options={[
              { value: 'sent', label: 'What was sent' },
              { value: 'answers', label: 'Answers to invitations' },
            ]}
            value={view}
            onChange={(next) => setSearch(next === 'answers' ? { view: next } : {}, { replace: true })}
          />
        }
        actions={
          <Button variant="primary" onClick={() => setWriting(true)}>
            Write a letter…
          </Button>
        }
      />
      <div className="p-6 max-sm:p-4">
        {view === 'answers' ? <AnswersTable event={event} /> : <MessageList event={event} />}
      </div>
      {writing && <LetterDialog event={event} onClose={() => setWriting(false)} />}
    </>
  );
}
