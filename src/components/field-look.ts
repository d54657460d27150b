/** The look that all form parts share. */
export const labelLook = 'block text-sm font-medium';
export const inputLook = 'w-full min-h-9 max-sm:min-h-11 rounded-[3px] border border-rule-strong bg-sheet px-2.5 py-1.5 text-ink placeholder:text-ink-soft data-[invalid]:border-oxide aria-invalid:border-oxide disabled:opacity-60';
export const errorLook = 'mt-1 flex gap-1.5 text-sm text-oxide before:content-["▲"] before:text-[0.6rem] before:leading-5';
