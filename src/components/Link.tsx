/** Links within the application, as text or as a button. */
import { Link as RouterLink, type LinkProps } from 'react-router-dom';
import { buttonLook, type ButtonKind } from './Button.tsx';

export function Link({ className = '', ...props }: LinkProps & { className?: string }) {
  return <RouterLink {...props} className={`break-words text-brass-deep underline decoration-rule-strong underline-offset-4 hover:decoration-current ${className}`} />;
}

export function LinkButton({ kind = 'primary', ...props }: Omit<LinkProps, 'className'> & { kind?: ButtonKind }) {
  return <RouterLink {...props} className={buttonLook(kind)} />;
}
