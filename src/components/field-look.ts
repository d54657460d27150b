/** The look that all form parts share. */
export const labelLook = 'block text-sm font-medium';
export const inputLook =
  'w-full min-w-0 min-h-9 max-sm:min-h-11 rounded-[2px] border border-rule-strong bg-paper-raised px-2.5 py-1.5 text-ink placeholder:text-ink-soft invalid:border-2 invalid:border-oxide aria-invalid:border-2 aria-invalid:border-oxide disabled:border-rule disabled:bg-paper disabled:text-ink-soft';
export const errorLook = 'mt-1 block text-sm text-pretty text-oxide';
