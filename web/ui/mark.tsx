/** Three woven wave lines: our mark. On Ink the middle line is light, on paper it is Ink. */
export function Mark({ size = 26, onInk = false }: { size?: number; onInk?: boolean }) {
  const colours = onInk ? ['#E3B457', '#F7F5F0', '#7BBCB7'] : ['var(--caution)', 'var(--ink)', 'var(--verdigris)'];
  return (
    <svg width={size} height={size} viewBox="0 0 26 26" fill="none" strokeWidth="2.2" strokeLinecap="round" aria-hidden>
      <path d="M2 7.6c4-3.2 6.9-1 11 .7s7 1.8 11-1.3" stroke={colours[0]} />
      <path d="M2 13.6c4-3.2 6.9-1 11 .7s7 1.8 11-1.3" stroke={colours[1]} />
      <path d="M2 19.6c4-3.2 6.9-1 11 .7s7 1.8 11-1.3" stroke={colours[2]} />
    </svg>
  );
}
