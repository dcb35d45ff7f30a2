import { useState } from 'react';
import type { BoardAward } from '@shared/features/grants/grants-committee.contract';
import { Button } from '@/components/button';
import { Textarea } from '@/components/field';
import { toast } from '@/components/toast';
import { fieldErrors, sayFailure } from '@/lib/problem';
import { useAnswerQuery } from './grants.queries';

/** The committee's answer to a funder's question. */
export function QueryAnswer({ event, award }: { event: string; award: BoardAward }) {
  const [text, setText] = useState('');
  const answer = useAnswerQuery(event);
  return (
    <form
      className="mt-2 grid gap-2 bg-cautionwash p-2"
      onSubmit={(submit) => {
        submit.preventDefault();
        answer.mutate(
          { award: award.id, version: award.version, text },
          {
            onSuccess: () => toast('The answer is sent to the funder.'),
            onError: (error) => !fieldErrors(error).text && sayFailure(error),
          },
        );
      }}
    >
      <Textarea
        dense
        rows={2}
        label="Your answer to the funder"
        hint="The funder knows no name: do not write one."
        maxLength={1000}
        value={text}
        onChange={(change) => setText(change.target.value)}
        error={fieldErrors(answer.error).text}
      />
      <div>
        <Button type="submit" busy={answer.isPending}>
          Send the answer
        </Button>
      </div>
    </form>
  );
}
