/** The name with its sign: a graduated beam on its fulcrum, a little out of balance. */
export function Logo() {
  return (
    <span className="flex items-center gap-2.5">
      <svg aria-hidden viewBox="0 0 40 24" className="h-6 w-10" fill="none" strokeLinecap="round">
        <path d="M2 10.500 38 6.500" className="stroke-ink" strokeWidth="2.200" />
        <path d="M7 10v4M12 9.400v6.500M17 8.900v4M24 8v4M29 7.500v5M34 7v3" className="stroke-brass" strokeWidth="1.800" />
        <path d="M20.500 9.500 25 22h-9z" className="fill-ink" />
        <circle cx="20.500" cy="8.500" r="2" className="fill-paper stroke-ink" strokeWidth="1.500" />
      </svg>
      <span className="text-[1.1875rem] font-semibold tracking-[-0.015em]">Pennyweight</span>
    </span>
  );
}
