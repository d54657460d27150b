/** A button; `primary` for the one thing to do next. While pending it keeps its place and its focus, cannot be pressed, and says so. */
import { Button as AriaButton, type ButtonProps as AriaProps } from 'react-aria-components';

export type ButtonKind = 'primary' | 'plain' | 'quiet' | 'danger';

const look: Record<ButtonKind, string> = {
  primary: 'border-ink bg-ink text-paper hover:border-brass-deep hover:bg-brass-deep',
  plain: 'border-rule-strong bg-paper-raised text-ink hover:border-ink hover:bg-brass-wash',
  quiet: 'border-transparent px-0! text-brass-deep underline decoration-rule-strong underline-offset-4 hover:decoration-current',
  danger: 'border-oxide bg-oxide text-paper hover:border-ink hover:bg-ink',
};

export const buttonLook = (kind: ButtonKind) =>
  `inline-flex min-h-9 cursor-pointer items-center justify-center gap-2 rounded-[2px] border px-3.5 py-1.5 text-[0.9375rem] leading-tight font-medium select-none max-sm:min-h-11 disabled:cursor-not-allowed disabled:opacity-50 ${look[kind]}`;

export interface ButtonProps extends Omit<AriaProps, 'className' | 'style' | 'children'> {
  kind?: ButtonKind;
  children: React.ReactNode;
}

export function Button({ kind = 'plain', children, ...props }: ButtonProps) {
  return (
    <AriaButton {...props} className={buttonLook(kind)}>
      {({ isPending }) => (
        <>
          {isPending && <span role="img" aria-label="working" className="size-3.5 animate-spin rounded-full border-2 border-current border-t-transparent" />}
          {children}
        </>
      )}
    </AriaButton>
  );
}
