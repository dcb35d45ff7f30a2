import {
  useId,
  type InputHTMLAttributes,
  type ReactNode,
  type SelectHTMLAttributes,
  type TextareaHTMLAttributes,
} from 'react';

export interface FieldProps {
  label: ReactNode;
  hint?: ReactNode;
  error?: string;
  /** Everything is needed unless it says optional. */
  optional?: boolean;
  /** Beside the label on the right, e.g. a count. */
  aside?: ReactNode;
  className?: string;
  /** The label is there for readers only. */
  hideLabel?: boolean;
}

interface ControlProps {
  id: string;
  'aria-describedby': string | undefined;
  'aria-invalid': true | undefined;
}

/** Label above, hint and error under the control, tied to it. */
export function Field({
  label,
  hint,
  error,
  optional,
  aside,
  className = '',
  hideLabel,
  children,
}: FieldProps & { children: (control: ControlProps) => ReactNode }) {
  const id = useId();
  const hintId = `${id}-hint`;
  const errorId = `${id}-error`;
  const described = [error && errorId, hint && hintId].filter(Boolean).join(' ') || undefined;
  return (
    <div className={`min-w-0 ${className}`}>
      <div className={hideLabel ? 'sr-only' : 'mb-1 flex items-baseline justify-between gap-3'}>
        <label htmlFor={id} className="font-semibold">
          {label}
          {optional && <span className="font-normal text-ink3"> optional</span>}
        </label>
        {aside && <span className="text-dense text-ink3">{aside}</span>}
      </div>
      {children({ id, 'aria-describedby': described, 'aria-invalid': error ? true : undefined })}
      {error && (
        <p id={errorId} className="mt-1 text-dense font-semibold text-alarm">
          {error}
        </p>
      )}
      {hint && (
        <p id={hintId} className="mt-1 text-dense text-ink3">
          {hint}
        </p>
      )}
    </div>
  );
}

/** The frame of everything that is filled in. */
export const controlClass = (wrong: boolean, dense = false): string =>
  `w-full min-w-0 bg-sheet text-ink rounded-field border ${wrong ? 'border-2 border-alarm' : 'border-field'} ${
    dense
      ? 'min-h-[30px] px-2 text-ui'
      : 'min-h-[40px] px-2.5 text-form max-sm:min-h-[46px] max-sm:text-[16px]'
  } disabled:bg-wash disabled:border-dashed [&:is(input,textarea):read-only]:bg-wash [&:is(input,textarea):read-only]:border-dashed`;

type Split<T> = Omit<T, keyof FieldProps> & FieldProps & { dense?: boolean };
const split = <T extends FieldProps & { dense?: boolean }>({
  label,
  hint,
  error,
  optional,
  aside,
  className,
  hideLabel,
  dense,
  ...rest
}: T) => ({
  field: { label, hint, error, optional, aside, className, hideLabel },
  dense,
  rest,
});

export function Input(
  props: Split<InputHTMLAttributes<HTMLInputElement>> & { ref?: React.Ref<HTMLInputElement> },
) {
  const { field, dense, rest } = split(props);
  return (
    <Field {...field}>
      {(control) => <input {...rest} {...control} className={controlClass(Boolean(field.error), dense)} />}
    </Field>
  );
}

export function Textarea(
  props: Split<TextareaHTMLAttributes<HTMLTextAreaElement>> & { ref?: React.Ref<HTMLTextAreaElement> },
) {
  const { field, dense, rest } = split(props);
  return (
    <Field {...field}>
      {(control) => (
        <textarea
          rows={4}
          {...rest}
          {...control}
          className={`${controlClass(Boolean(field.error), dense)} py-2`}
        />
      )}
    </Field>
  );
}

export interface Option {
  value: string;
  label: string;
}

export function Select({
  options,
  placeholder,
  ...props
}: Split<SelectHTMLAttributes<HTMLSelectElement>> & {
  options: readonly Option[];
  placeholder?: string;
  ref?: React.Ref<HTMLSelectElement>;
}) {
  const { field, dense, rest } = split(props);
  return (
    <Field {...field}>
      {(control) => (
        <select {...rest} {...control} className={controlClass(Boolean(field.error), dense)}>
          {placeholder !== undefined && <option value="">{placeholder}</option>}
          {options.map((option) => (
            <option key={option.value} value={option.value}>
              {option.label}
            </option>
          ))}
        </select>
      )}
    </Field>
  );
}

export function Checkbox({
  label,
  hint,
  error,
  className = '',
  ...rest
}: Omit<InputHTMLAttributes<HTMLInputElement>, 'type'> & {
  label: ReactNode;
  hint?: ReactNode;
  error?: string;
  ref?: React.Ref<HTMLInputElement>;
}) {
  const id = useId();
  const described = [hint && `${id}-hint`, error && `${id}-error`].filter(Boolean).join(' ') || undefined;
  return (
    <div className={className}>
      <label className="flex min-h-[24px] items-start gap-2">
        <input
          type="checkbox"
          {...rest}
          aria-describedby={described}
          aria-invalid={error ? true : undefined}
          className="mt-[1px] size-4 shrink-0 accent-act"
        />
        <span>{label}</span>
      </label>
      {hint && (
        <p id={`${id}-hint`} className="ml-6 text-dense text-ink3">
          {hint}
        </p>
      )}
      {error && (
        <p id={`${id}-error`} className="ml-6 text-dense font-semibold text-alarm">
          {error}
        </p>
      )}
    </div>
  );
}

/** Up to four choices, shown open in one frame. */
export function Choices<V extends string>({
  legend,
  name,
  options,
  value,
  onChange,
  error,
}: {
  legend: ReactNode;
  name: string;
  options: readonly { value: V; label: ReactNode; hint?: ReactNode }[];
  value: V | undefined;
  onChange: (value: V) => void;
  error?: string;
}) {
  return (
    <fieldset>
      <legend className="mb-1 font-semibold">{legend}</legend>
      <div
        className={`flex flex-wrap rounded-field border ${error ? 'border-2 border-alarm' : 'border-field'} divide-x divide-rule max-sm:flex-col max-sm:divide-x-0 max-sm:divide-y`}
      >
        {options.map((option) => (
          <label
            key={option.value}
            className={`flex min-h-[38px] flex-1 items-center gap-2 px-3 py-1.5 ${option.value === value ? 'bg-actwash font-semibold' : ''}`}
          >
            <input
              type="radio"
              name={name}
              value={option.value}
              checked={option.value === value}
              onChange={() => onChange(option.value)}
              className="size-4 shrink-0 accent-act"
            />
            <span>
              {option.label}
              {option.hint && <span className="block text-dense font-normal text-ink3">{option.hint}</span>}
            </span>
          </label>
        ))}
      </div>
      {error && <p className="mt-1 text-dense font-semibold text-alarm">{error}</p>}
    </fieldset>
  );
}

/** A few views of one thing, side by side. */
export function Segmented<V extends string>({
  label,
  options,
  value,
  onChange,
}: {
  label: string;
  options: readonly { value: V; label: string }[];
  value: V;
  onChange: (value: V) => void;
}) {
  return (
    <div
      role="group"
      aria-label={label}
      className="inline-flex overflow-hidden rounded-field border border-field"
    >
      {options.map((option) => (
        <button
          key={option.value}
          type="button"
          aria-pressed={option.value === value}
          onClick={() => onChange(option.value)}
          className={`min-h-[28px] border-r border-rule px-3 text-ui whitespace-nowrap last:border-r-0 ${option.value === value ? 'bg-ink font-semibold text-sheet' : 'bg-sheet text-ink2 hover:bg-wash'}`}
        >
          {option.label}
        </button>
      ))}
    </div>
  );
}
