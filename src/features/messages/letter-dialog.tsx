import { useQuery } from '@tanstack/react-query';
import { useRef, useState, type FormEvent } from 'react';
import {
  fieldNames,
  groupNames,
  letterGroups,
  mergeFields,
  type LetterGroup,
} from '@shared/features/messages/letter.rules';
import type { LetterPreview } from '@shared/features/messages/letters.contract';
import { count } from '@shared/lib/text';
import { Button } from '@/components/button';
import { Dialog } from '@/components/dialog';
import { Input, Select, Textarea } from '@/components/field';
import { toast } from '@/components/toast';
import { fieldErrors, sentenceOf } from '@/lib/problem';
import { letterGroupsQuery, usePreviewLetter, useSendLetter, useTestLetter } from './messages.queries';

/** A letter to a group: written with fields, read with a real reader's data, sent to oneself, then to all. */
export function LetterDialog({ event, onClose }: { event: string; onClose: () => void }) {
  const form = useLetterForm(event);
  const area = useRef<HTMLTextAreaElement>(null);
  const { letter, put, insert, preview, test, send, errors, failure } = form;
  const shown = preview.data;
  const submit = (e: FormEvent) => {
    e.preventDefault();
    form.read();
  };
  const sendAll = () =>
    send.mutate(letter, {
      onSuccess: ({ people }) => {
        toast(`Queued for ${count(people, 'person', 'people')}.`);
        onClose();
      },
    });
  return (
    <Dialog open onClose={onClose} title="Write a letter" width={760}>
      <form noValidate onSubmit={submit} className="grid gap-3 text-ui">
        <GroupSelect event={event} value={letter.group} onChange={(group) => put({ group })} />
        <Input
          dense
          label="Subject"
          value={letter.subject}
          onChange={(e) => put({ subject: e.target.value })}
          error={errors.subject}
          maxLength={200}
        />
        <Textarea
          ref={area}
          dense
          label="Text"
          rows={9}
          value={letter.text}
          onChange={(e) => put({ text: e.target.value })}
          error={errors.text}
          hint="An empty line begins a new paragraph."
        />
        <FieldButtons onChoose={(field) => insert(field, area.current)} />
        {failure && (
          <p role="alert" className="font-semibold text-alarm">
            {failure}
          </p>
        )}
        {shown && <Preview preview={shown} />}
        <div className="flex flex-wrap gap-2">
          {shown?.sample && (
            <Button variant="primary" busy={send.isPending} onClick={sendAll}>
              Send to {count(shown.people, 'person', 'people')}
            </Button>
          )}
          <Button type="submit" variant={shown ? 'secondary' : 'primary'} busy={preview.isPending}>
            Preview the letter
          </Button>
          <Button
            busy={test.isPending}
            onClick={() => test.mutate(letter, { onSuccess: () => toast('Sent to you.') })}
          >
            Send it to me only
          </Button>
          <Button onClick={onClose}>Leave it</Button>
        </div>
      </form>
    </Dialog>
  );
}

function useLetterForm(event: string) {
  const [letterId] = useState(() => crypto.randomUUID());
  const [values, setValues] = useState({
    group: 'speakers' as LetterGroup,
    subject: '',
    text: 'Dear {{name}},\n\n',
  });
  const preview = usePreviewLetter(event);
  const test = useTestLetter(event);
  const send = useSendLetter(event);
  const letter = { letterId, ...values };
  const error = send.error ?? test.error ?? preview.error;
  const errors = fieldErrors(error);
  const put = (change: Partial<typeof values>) => {
    setValues((before) => ({ ...before, ...change }));
    // What was previewed is no longer what would be sent.
    for (const mutation of [preview, test, send]) mutation.reset();
  };
  const insert = (field: string, area: HTMLTextAreaElement | null) => {
    const { selectionStart = values.text.length, selectionEnd = values.text.length } = area ?? {};
    put({ text: `${values.text.slice(0, selectionStart)}{{${field}}}${values.text.slice(selectionEnd)}` });
    area?.focus();
  };
  return {
    letter,
    put,
    insert,
    preview,
    test,
    send,
    errors,
    failure: error && Object.keys(errors).length === 0 ? sentenceOf(error) : undefined,
    read: () => preview.mutate(letter),
  };
}

function GroupSelect({
  event,
  value,
  onChange,
}: {
  event: string;
  value: LetterGroup;
  onChange: (group: LetterGroup) => void;
}) {
  const sizes = new Map(useQuery(letterGroupsQuery(event)).data?.items.map((item) => [item.group, item]));
  const refused = sizes.get(value)?.refused ?? 0;
  const options = letterGroups.map((group) => ({
    value: group,
    label: sizes.has(group) ? `${groupNames[group]}: ${sizes.get(group)?.people ?? 0}` : groupNames[group],
  }));
  return (
    <Select
      dense
      label="To"
      value={value}
      onChange={(e) => onChange(e.target.value as LetterGroup)}
      options={options}
      hint={
        refused > 0
          ? `${count(refused, 'person does', 'people do')} not want such letters and will get none.`
          : undefined
      }
    />
  );
}

function FieldButtons({ onChoose }: { onChoose: (field: string) => void }) {
  return (
    <div
      role="group"
      aria-label="Put in a field"
      className="flex flex-wrap items-baseline gap-x-3 gap-y-1 text-dense"
    >
      <span className="text-ink3">Put in:</span>
      {mergeFields.map((field) => (
        <Button key={field} variant="link" onClick={() => onChoose(field)}>
          {fieldNames[field]}
        </Button>
      ))}
    </div>
  );
}

function Preview({ preview: { sample } }: { preview: LetterPreview }) {
  if (!sample) return <p className="text-ink2">Nobody is in this group.</p>;
  return (
    <section aria-label="Preview" className="border-t border-ink pt-2">
      <p className="text-dense text-ink3">As {sample.toName} would get it</p>
      <p className="mt-1 font-semibold break-words">{sample.subject}</p>
      <pre
        tabIndex={0}
        aria-label="Text of the letter"
        className="mt-2 max-h-64 overflow-auto font-mono text-dense whitespace-pre-wrap"
      >
        {sample.text}
      </pre>
    </section>
  );
}
