import type { ComponentProps } from 'react';

const looks = { plain: '', main: 'button-main', quiet: 'button-quiet', danger: 'button-danger' } as const;

/** A button, 44 px high on phones. While `busy` it says so and takes no second press. */
export function Button({
  look = 'plain',
  busy = false,
  className = '',
  type = 'button',
  disabled,
  children,
  ...rest
}: ComponentProps<'button'> & { look?: keyof typeof looks; busy?: boolean }) {
  return (
    <button
      type={type}
      className={`button ${looks[look]} ${className}`}
      disabled={disabled || busy}
      aria-busy={busy || undefined}
      {...rest}
    >
      {busy && <span aria-hidden="true" className="size-2 animate-pulse rounded-full bg-current" />}
      {children}
    </button>
  );
}
