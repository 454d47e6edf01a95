/** The product's mark: two warps and two wefts, each passing over one and under the other. */
export function Mark({ size = 22 }: { size?: number }) {
  return (
    <svg width={size} height={size} viewBox="0 0 24 24" fill="none" strokeWidth="2" aria-hidden="true">
      <path stroke="currentColor" d="M7 2v12.4M7 18.6V22M17 2v3.4M17 9.6V22" />
      <path stroke="var(--accent)" d="M2 7.5h2.9M9.1 7.5H22M2 16.5h12.9M19.1 16.5H22" />
    </svg>
  );
}
