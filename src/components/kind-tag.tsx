/** CSS class of a talk kind's edge and tint. */
export const kindClass: Record<string, string> = {
  plenary: 'k-invited',
  invited: 'k-invited',
  contributed: 'k-contrib',
  course_lecture: 'k-course',
  exercise: 'k-exercise',
  poster: 'k-contrib',
  discussion: 'k-problems',
  social: 'k-social',
};

export const kindWords: Record<string, string> = {
  plenary: 'Plenary',
  invited: 'Invited',
  contributed: 'Contributed',
  course_lecture: 'Course',
  exercise: 'Exercises',
  poster: 'Poster',
  discussion: 'Problems',
  social: 'Social',
};

/** Edge pattern and word of a talk kind; `label` stands for the word, e.g. "Course A 4". */
export function KindTag({ kind, label }: { kind: string; label?: string }) {
  return (
    <span className={`whitespace-nowrap ${kindClass[kind] ?? 'k-social'}`}>
      <span className={`kind-swatch ${kindClass[kind] ?? 'k-social'}`} aria-hidden="true" />
      <span className="kind-word">{label ?? kindWords[kind] ?? kind}</span>
    </span>
  );
}
