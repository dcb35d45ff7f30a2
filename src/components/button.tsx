import type { ButtonHTMLAttributes, ReactNode, Ref } from 'react';
import { Link, type LinkProps } from 'react-router-dom';

export type ButtonVariant = 'primary' | 'secondary' | 'link' | 'danger';
export type ButtonSize = 'dense' | 'form' | 'large';

const base =
  'inline-flex items-center justify-center gap-1.5 font-semibold rounded-field whitespace-nowrap transition-colors duration-[120ms] disabled:opacity-50';
const look: Record<ButtonVariant, string> = {
  primary: 'bg-act text-actink border border-act no-underline hover:not-disabled:opacity-90',
  secondary: 'bg-sheet text-ink border border-field no-underline hover:not-disabled:bg-wash',
  danger: 'bg-sheet text-alarm border border-alarm no-underline hover:not-disabled:bg-alarmwash',
  link: 'text-act underline underline-offset-2 font-normal decoration-1',
};
const size: Record<ButtonSize, string> = {
  dense: 'min-h-[28px] px-3 text-ui',
  form: 'min-h-[40px] px-[18px] text-form max-sm:min-h-[44px]',
  large: 'min-h-[52px] px-9 text-[18px]',
};

/** The classes of a button, for links that look like one. */
export function buttonClass(
  variant: ButtonVariant = 'secondary',
  sizing: ButtonSize = 'dense',
  extra = '',
): string {
  const sized = variant === 'link' ? 'min-h-[24px] text-left' : size[sizing];
  return `${base} ${look[variant]} ${sized} ${extra}`;
}

interface ButtonProps extends ButtonHTMLAttributes<HTMLButtonElement> {
  variant?: ButtonVariant;
  sizing?: ButtonSize;
  /** Work is going on: the button says so and takes no second press. */
  busy?: boolean;
  ref?: Ref<HTMLButtonElement>;
  children: ReactNode;
}

/** A verb with its object. At most one `primary` in a view. */
export function Button({
  variant = 'secondary',
  sizing = 'dense',
  busy = false,
  className = '',
  disabled,
  children,
  ...rest
}: ButtonProps) {
  return (
    <button
      type="button"
      {...rest}
      disabled={disabled || busy}
      aria-busy={busy || undefined}
      className={buttonClass(variant, sizing, className)}
    >
      {children}
    </button>
  );
}

/** A link with the look of a button. */
export function LinkButton({
  variant = 'secondary',
  sizing = 'dense',
  className = '',
  ...rest
}: LinkProps & { variant?: ButtonVariant; sizing?: ButtonSize }) {
  return <Link {...rest} className={buttonClass(variant, sizing, className)} />;
}
