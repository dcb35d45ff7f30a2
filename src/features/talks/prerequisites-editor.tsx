import { useState } from 'react';
import type { Course } from '@shared/features/talks/talks-courses.contract';
import { prerequisiteCircle } from '@shared/features/talks/talks.rules';
import { plainLatex } from '@shared/lib/latex';
import { Button } from '@/components/button';
import { Select } from '@/components/field';
import { toast } from '@/components/toast';
import { sayFailure } from '@/lib/problem';
import { useReplacePrerequisites } from './talks.queries';

interface Pair {
  before: string;
  after: string;
}

/** Which lecture of another course must be over before a lecture begins; within a course the order is given. */
export function PrerequisitesEditor({
  event,
  courses,
  saved,
}: {
  event: string;
  courses: Course[];
  saved: Pair[];
}) {
  const [pairs, setPairs] = useState<Pair[]>(saved);
  const [before, setBefore] = useState('');
  const [after, setAfter] = useState('');
  const replace = useReplacePrerequisites(event);
  const options = courses.flatMap((course) =>
    course.lectures.map((lecture) => ({
      value: lecture.talkId,
      label: `${course.letter} ${lecture.number} ${plainLatex(lecture.title)}`,
    })),
  );
  const nameOf = (id: string): string =>
    options.find((option) => option.value === id)?.label ?? 'Another talk';
  const taken = pairs.some((pair) => pair.before === before && pair.after === after);
  const refusal = problemOf(pairs, { before, after }, nameOf);
  const changed = JSON.stringify(pairs) !== JSON.stringify(saved);
  const add = () => {
    setPairs([...pairs, { before, after }]);
    setBefore('');
    setAfter('');
  };
  return (
    <section>
      <h2 className="mb-3 font-semibold">Heard before</h2>
      <ul className="border-y border-ink text-dense">
        {pairs.map((pair) => (
          <li
            key={pair.before + pair.after}
            className="flex items-baseline gap-2 border-b border-rule py-1.5 last:border-b-0"
          >
            <span className="min-w-0 grow">
              {nameOf(pair.before)} <b className="font-semibold">before</b> {nameOf(pair.after)}
            </span>
            <Button
              variant="link"
              aria-label={`Remove ${nameOf(pair.before)} before ${nameOf(pair.after)}`}
              onClick={() => setPairs(pairs.filter((other) => other !== pair))}
            >
              Remove
            </Button>
          </li>
        ))}
        {pairs.length === 0 && (
          <li className="py-1.5 text-ink3">
            Nothing across courses. Within a course the lectures keep their order anyway.
          </li>
        )}
      </ul>
      {options.length > 1 && (
        <div className="mt-3 grid gap-2">
          <Select
            dense
            label="This lecture"
            placeholder="Choose"
            options={options}
            value={before}
            onChange={(e) => setBefore(e.target.value)}
          />
          <Select
            dense
            label="before this one"
            placeholder="Choose"
            options={options}
            value={after}
            error={refusal}
            onChange={(e) => setAfter(e.target.value)}
          />
          <div className="flex gap-2">
            <Button disabled={!before || !after || taken || Boolean(refusal)} onClick={add}>
              Add the pair
            </Button>
            <Button
              variant="primary"
              disabled={!changed}
              busy={replace.isPending}
              onClick={() =>
                replace.mutate(pairs, {
                  onSuccess: () => toast('Saved what is heard before what.'),
                  onError: sayFailure,
                })
              }
            >
              Save the pairs
            </Button>
          </div>
        </div>
      )}
    </section>
  );
}

function problemOf(pairs: Pair[], pair: Pair, nameOf: (id: string) => string): string | undefined {
  if (!pair.before || !pair.after) return undefined;
  if (pair.before === pair.after) return 'A lecture can’t come before itself.';
  const circle = prerequisiteCircle([...pairs, pair]);
  return (
    circle &&
    `This closes a circle: ${nameOf(circle.before)} would need ${nameOf(circle.after)} first, and the other way round.`
  );
}
