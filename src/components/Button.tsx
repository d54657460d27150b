/** A button; `primary` for the one thing to do next. While pending it cannot be pressed and says that it works. */
import { Button as AriaButton, type ButtonProps as AriaProps } from 'react-aria-components';

export type ButtonKind = 'primary' | 'plain' | 'quiet' | 'danger';

const look: Record<ButtonKind, string> = {
  primary: 'bg-brass-deep text-on-brass border-brass-deep hover:bg-ink hover:border-ink hover:text-paper',
  plain: 'border-rule-strong text-ink hover:border-ink hover:bg-brass-wash',
  quiet: 'border-transparent text-brass-deep underline decoration-rule-strong underline-offset-4 hover:decoration-current',
  danger: 'bg-oxide text-on-oxide border-oxide hover:bg-ink hover:border-ink hover:text-paper',
};

export const buttonLook = (kind: ButtonKind) =>
  `inline-flex min-h-9 cursor-pointer items-center justify-center gap-2 rounded-[3px] border px-3.5 py-1.5 text-[0.9375rem] font-medium no-underline max-sm:min-h-11 disabled:cursor-default disabled:opacity-55 ${look[kind]}`;

export interface ButtonProps extends Omit<AriaProps, 'className'> {
  kind?: ButtonKind;
}

export function Button({ kind = 'plain', isPending = false, children, ...props }: ButtonProps) {
  return (
    <AriaButton {...props} isDisabled={props.isDisabled || isPending} className={buttonLook(kind)}>
      {(state) => (
        <>
          {isPending && <span aria-hidden className="size-3.5 animate-spin rounded-full border-2 border-current border-t-transparent" />}
          {typeof children === 'function' ? children({ ...state, defaultChildren: null }) : children}
        </>
      )}
    </AriaButton>
  );
}
