import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link } from 'react-router-dom';
import type { Course } from '@shared/features/talks/talks-courses.contract';
import { count } from '@shared/lib/text';
import { Button } from '@/components/button';
import { MathLine } from '@/components/math-text';
import { EmptyState, QueryView } from '@/components/states';
import { CourseDialog } from './course-dialog';
import { PrerequisitesEditor } from './prerequisites-editor';
import { coursesQuery } from './talks.queries';

/** Lecture courses with their lectures in order, and what must be heard before what. */
export function CoursesView({ event }: { event: string }) {
  const query = useQuery(coursesQuery(event));
  const [editing, setEditing] = useState<Course | 'new'>();
  return (
    <div className="grid gap-8 p-6 max-sm:p-4 xl:grid-cols-[1fr_480px]">
      <QueryView query={query} what="the lecture courses">
        {({ items, prerequisites }) => (
          <>
            <section>
              <div className="mb-3 flex items-center justify-between">
                <h2 className="font-semibold">{count(items.length, 'lecture course')}</h2>
                <Button onClick={() => setEditing('new')}>Create a lecture course …</Button>
              </div>
              {items.length === 0 && (
                <EmptyState
                  title="No lecture courses."
                  fact="A course is a numbered row of lectures, each with an exercise session where wanted."
                />
              )}
              {items.map((course) => (
                <article key={course.id} className="border-t border-ink py-3">
                  <div className="flex flex-wrap items-baseline justify-between gap-2">
                    <h3 className="font-serif text-[16px] leading-5">
                      {course.letter} · <MathLine source={course.title} />
                    </h3>
                    <span className="text-dense text-ink3">
                      “{course.shortTitle}”, at least {count(course.minNights, 'night')} between lectures, at
                      most {course.maxPerDay} a day{' '}
                      <Button
                        variant="link"
                        aria-label={`Change course ${course.letter}`}
                        onClick={() => setEditing(course)}
                      >
                        Change
                      </Button>
                    </span>
                  </div>
                  <ol className="mt-1 text-dense">
                    {course.lectures.map((lecture) => (
                      <li key={lecture.talkId} className="flex gap-3 py-0.5">
                        <b className="w-10 font-semibold text-ecourse">
                          {course.letter} {lecture.number}
                        </b>
                        <Link className="quiet" to={`/organise/${event}/talks?talk=${lecture.talkId}`}>
                          <MathLine source={lecture.title} />
                        </Link>
                      </li>
                    ))}
                  </ol>
                </article>
              ))}
            </section>
            <PrerequisitesEditor
              key={JSON.stringify(prerequisites)}
              event={event}
              courses={items}
              saved={prerequisites}
            />
          </>
        )}
      </QueryView>
      {editing && (
        <CourseDialog
          event={event}
          course={editing === 'new' ? undefined : editing}
          onClose={() => setEditing(undefined)}
        />
      )}
    </div>
  );
}
