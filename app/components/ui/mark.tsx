/** The half disc: sign of the product and of an arc. Decorative; the words stand beside it. */
export function Mark({ width = 20 }: { width?: number }) {
  return (
    <svg width={width} height={(width * 12) / 20} viewBox="0 0 20 12" aria-hidden="true" className="fill-tide">
      <path d="M0 11a10 10 0 0 1 20 0z" />
    </svg>
  );
}
