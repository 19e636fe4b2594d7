import { classFill, classLine, classStyle, markerPath } from "./classStyle";

export interface ClassMarkerProps {
  /** Place in the page's class sequence; below 0 for samples without a class, which get a hollow circle. */
  readonly index: number;
  readonly size?: number;
  readonly className?: string;
}

/** The marker of a class, as it stands in tables, keys and plots. Decoration: the class's name always stands beside it. */
export function ClassMarker({ index, size = 10, className }: ClassMarkerProps) {
  const shape = index < 0 ? "circle" : classStyle(index).shape;
  return (
    <svg width={size} height={size} viewBox="0 0 10 10" aria-hidden="true" className={`inline-block shrink-0 ${className ?? ""}`}>
      <path d={markerPath(shape, 5, 5, 3.5)} fill={classFill(index)} stroke={classLine(index)} strokeWidth={1} />
    </svg>
  );
}
