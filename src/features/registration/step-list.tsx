/** Steps of a form; the sun stands on the present one. */
export function StepList({
  steps,
  present,
  onChoose,
}: {
  steps: readonly string[];
  present: number;
  onChoose: (step: number) => void;
}) {
  return (
    <ol className="mt-7 grid gap-5 max-lg:mt-3 max-lg:grid-flow-col max-lg:justify-start max-lg:gap-4">
      {steps.map((label, index) => {
        const done = index < present;
        const now = index === present;
        return (
          <li
            key={label}
            aria-current={now ? 'step' : undefined}
            className="relative flex items-center gap-3"
          >
            {index > 0 && (
              <span
                aria-hidden="true"
                className="absolute -top-5 left-[11.5px] h-5 w-px bg-field max-lg:hidden"
              />
            )}
            <span
              aria-hidden="true"
              className={`flex size-6 shrink-0 items-center justify-center rounded-full text-dense font-semibold ${done ? 'bg-ink2 text-sheet' : now ? 'bg-sun text-sunink' : 'border border-field bg-sheet text-ink2'}`}
            >
              {done ? '✓' : index + 1}
            </span>
            {done ? (
              <button
                type="button"
                className="min-h-[24px] text-left text-form text-ink2 hover:underline max-sm:sr-only"
                onClick={() => onChoose(index)}
              >
                {label}
              </button>
            ) : (
              <span className={`text-form ${now ? 'font-semibold' : 'text-ink2 max-sm:sr-only'}`}>
                {label}
              </span>
            )}
          </li>
        );
      })}
    </ol>
  );
}
