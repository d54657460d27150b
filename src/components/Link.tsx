/** Links within the application, as text or as a button. */
import { Link as RouterLink, type LinkProps } from 'react-router-dom';
import { buttonLook, type ButtonKind } from './Button.tsx';

export function Link(props: LinkProps) {
  return <RouterLink {...props} className="text-brass-deep underline decoration-rule-strong underline-offset-3 hover:decoration-current" />;
}

export function LinkButton({ kind = 'primary', ...props }: LinkProps & { kind?: ButtonKind }) {
  return <RouterLink {...props} className={buttonLook(kind)} />;
}
