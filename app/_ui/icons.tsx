/** Small drawings in the ink of their surroundings, 16 × 16. Decoration: the control around each says what it does. */
export interface IconProps {
  readonly size?: number;
  readonly className?: string;
}

function drawn(path: string, strokeWidth = 1.2) {
  return function Icon({ size = 16, className }: IconProps) {
    return (
      <svg
        width={size}
        height={size}
        viewBox="0 0 16 16"
        fill="none"
        stroke="currentColor"
        strokeWidth={strokeWidth}
        strokeLinecap="round"
        aria-hidden="true"
        className={`shrink-0 ${className ?? ""}`}
      >
        <path d={path} />
      </svg>
    );
  };
}

export const IconClose = drawn("M3.5 3.5l9 9M12.5 3.5l-9 9");
export const IconMore = drawn("M3 8h.01M8 8h.01M13 8h.01", 2.4);
export const IconMove = drawn("M6 3h.01M10 3h.01M6 8h.01M10 8h.01M6 13h.01M10 13h.01", 2.2);
export const IconPlus = drawn("M8 2.5v11M2.5 8h11");
export const IconDown = drawn("M4 6l4 4 4-4");
export const IconRight = drawn("M6 4l4 4-4 4");
export const IconUp = drawn("M4 10l4-4 4 4");
export const IconCheck = drawn("M3 8.5l3.5 3.5L13 4.5");
export const IconEye = drawn("M1.5 8S4 3.5 8 3.5 14.5 8 14.5 8 12 12.5 8 12.5 1.5 8 1.5 8zM8 6a2 2 0 100 4 2 2 0 000-4z");
export const IconEyeClosed = drawn("M1.5 7S4 10.5 8 10.5 14.5 7 14.5 7M4 9.6l-1 1.9M8 10.5v2.2M12 9.6l1 1.9");
export const IconLight = drawn("M8 1.5a6.5 6.5 0 100 13 6.5 6.5 0 000-13zM8 0v16M0 8h16", 1);
export const IconTrace = drawn("M2 13h4V8h4V3h4");
export const IconFile = drawn("M4 1.5h5l3 3v10H4zM9 1.5v3h3");
export const IconCopy = drawn("M5.5 5.5h8v8h-8zM10.5 5.5v-3h-8v8h3");

/** The product's mark: two falling curves that meet in a point, from which one line leads on. */
export function Mark({ className }: { readonly className?: string }) {
  return (
    <svg width={36} height={28} viewBox="0 0 36 28" role="img" aria-label="Cotectic" className={className}>
      <path d="M2 3C5 13 10 17 18 18M34 3C31 13 26 17 18 18M18 18V27" fill="none" stroke="currentColor" strokeWidth={1.6} />
      <circle cx={18} cy={18} r={2} fill="currentColor" />
    </svg>
  );
}
