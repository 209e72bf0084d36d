/** The sign of the product: threads that go in, one that comes out, one that was cut. */
export function Mark({ size = 32 }: { size?: number }) {
  return (
    <svg aria-hidden="true" width={size} height={size} viewBox="0 0 32 32" fill="none" strokeLinecap="round" strokeWidth="2">
      <path d="M3 6 C14 6 16 16 29 16 M3 13 C13 13 16 16 29 16 M3 20 C13 20 16 16 29 16" stroke="var(--color-indigo)" />
      <path d="M3 27 C11 27 14 25 16 29" stroke="var(--color-madder)" />
    </svg>
  );
}
