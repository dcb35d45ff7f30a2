import { useQuery } from '@tanstack/react-query';
import { useState, type FormEvent } from 'react';
import type { BodyOf } from '@shared/http/endpoint';
import type { Talk, TalkKind, updateTalk } from '@shared/features/talks/talks.contract';
import { usualMinutes } from '@shared/features/talks/talks.rules';
import { plainLatex } from '@shared/lib/latex';
import { Button } from '@/components/button';
import { Dialog } from '@/components/dialog';
import { Input, Select } from '@/components/field';
import { toast } from '@/components/toast';
import { fieldErrors, sentenceOf } from '@/lib/problem';
import { PeopleField, type PersonEntry } from './people-field';
import { kindOptions } from './talk-filters';
import { coursesQuery, useCreateTalk, useUpdateTalk } from './talks.queries';

type Structure = Omit<BodyOf<typeof updateTalk>, 'people'>;
const blank: Structure = {
  kind: 'invited',
  ...usualMinutes.invited,
  courseId: null,
  number: null,
  exerciseOf: null,
  expectedAudience: null,
};
const structureOf = ({
  kind,
  minutes,
  questionMinutes,
  courseId,
  number,
  exerciseOf,
  expectedAudience,
}: Talk): Structure => ({ kind, minutes, questionMinutes, courseId, number, exerciseOf, expectedAudience });

/** Puts a talk on the list, or changes kind, length, course and people of one. */
export function TalkDialog({
  event,
  talk,
  onClose,
  onDone,
}: {
  event: string;
  talk?: Talk;
  onClose: () => void;
  onDone: (talk: string) => void;
}) {
  const [body, setBody] = useState<Structure>(talk ? structureOf(talk) : blank);
  const [title, setTitle] = useState(talk?.title ?? '');
  const [people, setPeople] = useState<PersonEntry[]>(
    talk?.people.map(({ accountId, part, printedName }) => ({ accountId, part, printedName })) ?? [],
  );
  const create = useCreateTalk(event);
  const update = useUpdateTalk();
  const error = create.error ?? update.error;
  const errors = fieldErrors(error);
  const set = (part: Partial<Structure>) => setBody({ ...body, ...part });
  const submit = (happening: FormEvent) => {
    happening.preventDefault();
    const named = people.map(({ printedName: _printed, ...person }) => person);
    const done = {
      onSuccess: (saved: Talk) => {
        toast('The talk is saved.');
        onDone(saved.id);
        onClose();
      },
    };
    if (talk) update.mutate({ talk, body: { ...body, people: named } }, done);
    else create.mutate({ ...body, title, people: named }, done);
  };
  return (
    <Dialog open onClose={onClose} title={talk ? 'Change kind and people' : 'Add a talk'} width={620}>
      <form noValidate onSubmit={submit} className="grid gap-3">
        {!talk && (
          <Input
            label="Title, LaTeX"
            value={title}
            error={errors.title}
            maxLength={300}
            onChange={(e) => setTitle(e.target.value)}
          />
        )}
        <div className="grid gap-3 sm:grid-cols-4">
          <Select
            className="sm:col-span-2"
            label="Kind"
            options={kindOptions}
            value={body.kind}
            error={errors.kind}
            onChange={(e) =>
              set({
                kind: e.target.value as TalkKind,
                ...(talk ? {} : usualMinutes[e.target.value as TalkKind]),
              })
            }
          />
          <Input
            label="Minutes"
            type="number"
            min={5}
            step={5}
            value={body.minutes}
            error={errors.minutes}
            onChange={(e) => set({ minutes: Number(e.target.value) })}
          />
          <Input
            label="Questions"
            type="number"
            min={0}
            step={5}
            value={body.questionMinutes}
            error={errors.questionMinutes}
            onChange={(e) => set({ questionMinutes: Number(e.target.value) })}
          />
        </div>
        {(body.kind === 'course_lecture' || body.kind === 'exercise') && (
          <CoursePlace event={event} body={body} errors={errors} onChange={set} />
        )}
        <Input
          label="People expected"
          optional
          type="number"
          min={1}
          value={body.expectedAudience ?? ''}
          error={errors.expectedAudience}
          onChange={(e) => set({ expectedAudience: e.target.value ? Number(e.target.value) : null })}
        />
        <PeopleField people={people} onChange={setPeople} errors={errors} />
        {error && Object.keys(errors).length === 0 && (
          <p role="alert" className="font-semibold text-alarm">
            {sentenceOf(error)}
          </p>
        )}
        <div className="flex justify-end gap-2">
          <Button sizing="form" onClick={onClose}>
            Leave it
          </Button>
          <Button type="submit" variant="primary" sizing="form" busy={create.isPending || update.isPending}>
            {talk ? 'Save the talk' : 'Add the talk'}
          </Button>
        </div>
      </form>
    </Dialog>
  );
}

/** Where a lecture or exercise session stands within the courses. */
function CoursePlace({
  event,
  body,
  errors,
  onChange,
}: {
  event: string;
  body: Structure;
  errors: Record<string, string>;
  onChange: (part: Partial<Structure>) => void;
}) {
  const courses = useQuery(coursesQuery(event)).data?.items ?? [];
  const lectures = courses.find((course) => course.id === body.courseId)?.lectures ?? [];
  return (
    <div className="grid gap-3 sm:grid-cols-3">
      <Select
        label="Course"
        placeholder="None"
        options={courses.map((course) => ({
          value: course.id,
          label: `${course.letter} ${course.shortTitle}`,
        }))}
        value={body.courseId ?? ''}
        error={errors.courseId}
        onChange={(e) => onChange({ courseId: e.target.value || null, exerciseOf: null })}
      />
      <Input
        label="Number"
        type="number"
        min={1}
        max={99}
        value={body.number ?? ''}
        error={errors.number}
        onChange={(e) => onChange({ number: e.target.value ? Number(e.target.value) : null })}
      />
      {body.kind === 'exercise' && (
        <Select
          label="Belongs to lecture"
          placeholder="None"
          options={lectures.map((lecture) => ({
            value: lecture.talkId,
            label: `${lecture.number} ${plainLatex(lecture.title)}`,
          }))}
          value={body.exerciseOf ?? ''}
          error={errors.exerciseOf}
          onChange={(e) => onChange({ exerciseOf: e.target.value || null })}
        />
      )}
    </div>
  );
}
