/** What holds for everything on these pages. */
export function StandingCaution() {
  return (
    <footer data-shell className="mt-auto border-t border-rule py-5 text-sm text-pretty text-ink-soft">
      <p className="max-w-[75ch]">
        What is released here is data to train on, not a proven model. Verify and validate any model made from it before a decision about safety rests on it. Whether data may be
        shared, exported or licensed is for your organisation's own rules and advisers.
      </p>
    </footer>
  );
}
