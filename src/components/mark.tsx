/** The mark: a sagging cord between two brass plugs. */
export function Mark({ width = 34 }: { readonly width?: number }) {
  return (
    <svg aria-hidden="true" viewBox="0 0 34 20" width={width} height={(width * 20) / 34} className="shrink-0">
      <path d="M6.5 5.5C9 18.5 25 18.5 27.5 5.5" fill="none" stroke="var(--ink)" strokeWidth="4.6" />
      <path d="M11.8 12.4c3 2.7 7.4 2.7 10.4 0" fill="none" stroke="var(--brass)" strokeWidth="1.8" />
      <path
        d="M2.5 1.2h7.6v5.6H2.5zM23.9 1.2h7.6v5.6h-7.6z"
        fill="var(--brass)"
        stroke="var(--ink)"
        strokeWidth="1.6"
      />
    </svg>
  );
}
