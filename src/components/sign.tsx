/** Square: must be settled. Diamond: worth a look. Tick: fits. Each differs by shape, not only by colour. */
export function Sign({ kind, label }: { kind: 'must' | 'wish' | 'good'; label?: string }) {
  const hidden = label ? { role: 'img', 'aria-label': label } : { 'aria-hidden': true };
  if (kind === 'must') {
    return (
      <svg width="14" height="14" viewBox="0 0 14 14" className="mt-[2px] shrink-0" {...hidden}>
        <rect x="1" y="1" width="12" height="12" rx="2" fill="var(--color-alarm)" />
        <path d="M7 3.5v4.2M7 9.4v1.2" stroke="var(--color-sheet)" strokeWidth="1.7" />
      </svg>
    );
  }
  if (kind === 'wish') {
    return (
      <svg width="14" height="14" viewBox="0 0 14 14" className="mt-[2px] shrink-0" {...hidden}>
        <path
          d="M7 1.2 12.8 7 7 12.8 1.2 7Z"
          fill="var(--color-sheet)"
          stroke="var(--color-caution)"
          strokeWidth="1.5"
        />
      </svg>
    );
  }
  return (
    <svg width="14" height="14" viewBox="0 0 14 14" className="mt-[2px] shrink-0" {...hidden}>
      <path d="M2.5 7.5 5.5 10.5 11.5 3.5" fill="none" stroke="var(--color-good)" strokeWidth="1.8" />
    </svg>
  );
}
