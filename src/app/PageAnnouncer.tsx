/** Tells a screen reader which page has been opened, since no page load does it here. */
import { useEffect, useState } from 'react';
import { useLocation } from 'react-router-dom';

export function PageAnnouncer() {
  const { pathname } = useLocation();
  const [title, setTitle] = useState('');
  useEffect(() => {
    // Pages set their title after they have been drawn.
    const timer = setTimeout(() => setTitle(document.title), 300);
    return () => clearTimeout(timer);
  }, [pathname]);
  return <p aria-live="polite" className="sr-only">{title}</p>;
}
