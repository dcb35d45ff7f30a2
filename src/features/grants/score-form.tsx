import { useRef, useState } from 'react';
import type { GrantDetail } from '@shared/features/grants/grants-committee.contract';
import { Button } from '@/components/button';
import { Dialog } from '@/components/dialog';
import { Select, Textarea } from '@/components/field';
import { toast } from '@/components/toast';
import { fieldErrors, sayFailure } from '@/lib/problem';
import { useScoreGrant } from './grants.queries';

const options = Array.from({ length: 10 }, (_, n) => ({
  value: String(10 - n),
  label: 10 - n === 10 ? '10, best' : String(10 - n),
}));

/** One's own score with a comment, or a conflict of interest. */
export function ScoreForm({ event, detail }: { event: string; detail: GrantDetail }) {
  const [score, setScore] = useState(detail.myReview?.score ? String(detail.myReview.score) : '');
  const [comment, setComment] = useState(detail.myReview?.comment ?? '');
  const [declaring, setDeclaring] = useState(false);
  const save = useScoreGrant(event, detail.row.id);
  const safe = useRef<HTMLButtonElement>(null);
  const failed = (error: unknown) => Object.keys(fieldErrors(error)).length === 0 && sayFailure(error);
  return (
    <form
      className="mt-2 grid gap-2"
      onSubmit={(submit) => {
        submit.preventDefault();
        save.mutate(
          { score: score ? Number(score) : null, comment, conflict: false },
          { onSuccess: () => toast('Your score is saved.'), onError: failed },
        );
      }}
    >
      <Select
        dense
        label="Your score"
        options={options}
        placeholder="1 to 10"
        value={score}
        onChange={(change) => setScore(change.target.value)}
        error={fieldErrors(save.error).score}
      />
      <Textarea
        dense
        label="Comment"
        optional
        rows={2}
        maxLength={2000}
        value={comment}
        onChange={(change) => setComment(change.target.value)}
        error={fieldErrors(save.error).comment}
      />
      <div className="flex flex-wrap items-center gap-3">
        <Button type="submit" busy={save.isPending}>
          Save your score
        </Button>
        <Button variant="link" onClick={() => setDeclaring(true)}>
          Declare a conflict of interest…
        </Button>
      </div>
      <Dialog
        open={declaring}
        onClose={() => setDeclaring(false)}
        title="Declare a conflict of interest"
        focusFirst={safe}
      >
        <p>
          You will no longer see this application, nor its scores. A score that you gave is removed. The
          others of the committee decide.
        </p>
        <div className="mt-4 flex gap-2">
          <Button ref={safe} onClick={() => setDeclaring(false)}>
            Leave it
          </Button>
          <Button
            variant="danger"
            busy={save.isPending}
            onClick={() =>
              save.mutate(
                { score: null, comment: '', conflict: true },
                { onSuccess: () => toast('The conflict of interest is recorded.'), onError: failed },
              )
            }
          >
            Declare the conflict
          </Button>
        </div>
      </Dialog>
    </form>
  );
}
