/** The mark: three squares stacked in a yard, one of them still an outline. */
export function Mark({ className }: { readonly className?: string }) {
  return (
    <svg viewBox="0 0 24 24" aria-hidden className={className}>
      <rect x="7.75" y="2.75" width="8.5" height="8.5" fill="none" stroke="currentColor" strokeWidth="1.5" />
      <rect x="2" y="13" width="10" height="10" fill="currentColor" />
      <rect x="13" y="13" width="10" height="10" className="fill-petrol" />
    </svg>
  );
}
