/** The tail mark: a queue growing back from its stop line and emptying again, the dot where its tail stood farthest. */
export function Mark({ size = 26 }: { size?: number }) {
  return (
    <svg aria-hidden="true" width={size} height={size} viewBox="0 0 32 32" fill="none" stroke="currentColor">
      <path d="M3 26.5 20 8l9 18.5Z" strokeWidth="2.4" strokeLinejoin="round" />
      <path d="M10 26.5 20 15.5l5 11" strokeWidth="1.3" />
      <circle cx="20" cy="7.5" r="4" fill="#C43E1C" stroke="none" />
    </svg>
  );
}
