/** The mark: a beam on its stand, a record of uneven weights hanging from it. */
export function Balance() {
  return (
    <svg aria-hidden viewBox="0 0 32 28" className="size-7 text-brass-deep" fill="none" stroke="currentColor" strokeWidth="2" strokeLinecap="round">
      <path d="M3 8.5 29 6.5M16 7.5V26M11 26h10" />
      <path d="M4.5 9v9M8 9v9M11.5 9v5M21 7.5v9M24.5 7.5v12M28 7.5v5" strokeWidth="1.6" />
    </svg>
  );
}
