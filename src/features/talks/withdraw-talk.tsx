import { useRef, useState } from 'react';
import type { Talk } from '@shared/features/talks/talks.contract';
import { Button } from '@/components/button';
import { Dialog } from '@/components/dialog';
import { Textarea } from '@/components/field';
import { toast } from '@/components/toast';
import { sayFailure } from '@/lib/problem';
import { useWithdraw } from './talks.queries';

/** A withdrawn talk stays withdrawn: the safe action has the focus. */
export function WithdrawTalk({ talk }: { talk: Talk }) {
  const [open, setOpen] = useState(false);
  const [note, setNote] = useState('');
  const withdraw = useWithdraw();
  const safe = useRef<HTMLButtonElement>(null);
  const confirm = () =>
    withdraw.mutate(
      { talk, note },
      {
        onSuccess: () => {
          setOpen(false);
          toast('The talk is withdrawn.');
        },
        onError: sayFailure,
      },
    );
  return (
    <div>
      <Button variant="link" onClick={() => setOpen(true)}>
        Withdraw this talk …
      </Button>
      <Dialog open={open} onClose={() => setOpen(false)} title="Withdraw this talk?" focusFirst={safe}>
        <p className="mb-3">
          It leaves the programme and can’t be taken up again. Abstract and files stay on record.
        </p>
        <Textarea
          label="Why"
          optional
          maxLength={2000}
          value={note}
          onChange={(event) => setNote(event.target.value)}
        />
        <div className="mt-4 flex justify-end gap-2">
          <Button ref={safe} sizing="form" onClick={() => setOpen(false)}>
            Keep the talk
          </Button>
          <Button variant="danger" sizing="form" busy={withdraw.isPending} onClick={confirm}>
            Withdraw the talk
          </Button>
        </div>
      </Dialog>
    </div>
  );
}
