import { useState, type FormEvent } from 'react';
import type { BodyOf } from '@shared/http/endpoint';
import type { Course, createCourse } from '@shared/features/talks/talks-courses.contract';
import { Button } from '@/components/button';
import { Dialog } from '@/components/dialog';
import { Checkbox, Input } from '@/components/field';
import { toast } from '@/components/toast';
import { fieldErrors, sentenceOf } from '@/lib/problem';
import { PeopleField, type PersonEntry } from './people-field';
import { useCreateCourse, useUpdateCourse } from './talks.queries';

type Particulars = Pick<Course, 'letter' | 'title' | 'shortTitle' | 'minNights' | 'maxPerDay'>;
type Rows = Pick<BodyOf<typeof createCourse>, 'lectures' | 'minutes' | 'exerciseMinutes'>;
const lecturing = [
  { value: 'speaker' as const, label: 'Lecturer' },
  { value: 'tutor' as const, label: 'Tutor' },
];

/** A new course comes with its lectures; an existing one changes its particulars only. */
export function CourseDialog({
  event,
  course,
  onClose,
}: {
  event: string;
  course?: Course;
  onClose: () => void;
}) {
  const [fields, setFields] = useState<Particulars>(
    course ?? { letter: '', title: '', shortTitle: '', minNights: 1, maxPerDay: 1 },
  );
  const [rows, setRows] = useState<Rows>({ lectures: 5, minutes: 60, exerciseMinutes: 90 });
  const [people, setPeople] = useState<PersonEntry[]>([]);
  const create = useCreateCourse(event);
  const update = useUpdateCourse(event);
  const error = create.error ?? update.error;
  const errors = fieldErrors(error);
  const set = (part: Partial<Particulars>) => setFields({ ...fields, ...part });
  const submit = (happening: FormEvent) => {
    happening.preventDefault();
    const { letter, title, shortTitle, minNights, maxPerDay } = fields;
    const body = { letter, title, shortTitle, minNights, maxPerDay };
    const done = {
      onSuccess: () => {
        toast(`Course ${letter} is saved.`);
        onClose();
      },
    };
    const named = (part: 'speaker' | 'tutor') =>
      people.filter((person) => person.part === part).map(({ printedName: _printed, ...person }) => person);
    if (course) update.mutate({ course: course.id, version: course.version, body }, done);
    else create.mutate({ ...body, ...rows, lecturers: named('speaker'), tutors: named('tutor') }, done);
  };
  return (
    <Dialog
      open
      onClose={onClose}
      title={course ? `Change course ${course.letter}` : 'Create a lecture course'}
      width={620}
    >
      <form noValidate onSubmit={submit} className="grid gap-3">
        <div className="grid gap-3 sm:grid-cols-[90px_1fr_200px]">
          <Input
            label="Letter"
            value={fields.letter}
            maxLength={1}
            error={errors.letter}
            onChange={(e) => set({ letter: e.target.value.toUpperCase() })}
          />
          <Input
            label="Title, LaTeX"
            value={fields.title}
            maxLength={300}
            error={errors.title}
            onChange={(e) => set({ title: e.target.value })}
          />
          <Input
            label="Short title"
            value={fields.shortTitle}
            maxLength={18}
            error={errors.shortTitle}
            aside={`${fields.shortTitle.length} of 18`}
            onChange={(e) => set({ shortTitle: e.target.value })}
          />
        </div>
        <div className="grid gap-3 sm:grid-cols-2">
          <Input
            label="Nights between lectures, at least"
            type="number"
            min={0}
            max={6}
            value={fields.minNights}
            error={errors.minNights}
            onChange={(e) => set({ minNights: Number(e.target.value) })}
          />
          <Input
            label="Lectures a day, at most"
            type="number"
            min={1}
            max={4}
            value={fields.maxPerDay}
            error={errors.maxPerDay}
            onChange={(e) => set({ maxPerDay: Number(e.target.value) })}
          />
        </div>
        {!course && (
          <>
            <div className="grid gap-3 sm:grid-cols-3">
              <Input
                label="Lectures"
                type="number"
                min={1}
                max={30}
                value={rows.lectures}
                error={errors.lectures}
                onChange={(e) => setRows({ ...rows, lectures: Number(e.target.value) })}
              />
              <Input
                label="Minutes each"
                type="number"
                min={5}
                step={5}
                value={rows.minutes}
                error={errors.minutes}
                onChange={(e) => setRows({ ...rows, minutes: Number(e.target.value) })}
              />
              {rows.exerciseMinutes != null && (
                <Input
                  label="Minutes of exercises"
                  type="number"
                  min={5}
                  step={5}
                  value={rows.exerciseMinutes}
                  error={errors.exerciseMinutes}
                  onChange={(e) => setRows({ ...rows, exerciseMinutes: Number(e.target.value) })}
                />
              )}
            </div>
            <Checkbox
              label="With an exercise session to each lecture"
              checked={rows.exerciseMinutes != null}
              onChange={(e) => setRows({ ...rows, exerciseMinutes: e.target.checked ? 90 : null })}
            />
            <PeopleField
              people={people}
              onChange={setPeople}
              errors={{ ...errors, people: errors.lecturers ?? errors.tutors ?? '' }}
              parts={lecturing}
            />
          </>
        )}
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
            {course ? 'Save the course' : 'Create the course'}
          </Button>
        </div>
      </form>
    </Dialog>
  );
}
