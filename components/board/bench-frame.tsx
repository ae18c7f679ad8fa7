import { Crop } from "@/components/board/crop";
import { classNames } from "@/components/ui/class-names";
import { isFarShifted, type CropCentre } from "@/lib/board/layout";
import type { BoardFrame } from "@/lib/board/model";
import { distanceText, percent } from "@/lib/board/words";

export interface BenchFrameProps {
  readonly projectId: string;
  readonly frame: BoardFrame;
  /** Null: the whole frame. */
  readonly centre: CropCentre | null;
  readonly size: { readonly widthPx: number; readonly heightPx: number };
  readonly isReference: boolean;
  readonly isAsked: boolean;
  readonly isWhy: boolean;
  /** Put here and not measured yet. */
  readonly isMeasuring: boolean;
  /** Null: nothing to compare it with. */
  readonly onCompare: (() => void) | null;
}

/** One frame on the bench of somebody who may not change it: its crop at 100 %, or all of it, and what was measured. */
export function BenchFrame(props: BenchFrameProps) {
  const { frame, size, onCompare } = props;
  return (
    <li style={{ width: size.widthPx }} className="text-sm">
      {onCompare ? (
        <button
          type="button"
          aria-label={`Compare ${frame.name} with the reference at 100 %`}
          onClick={onCompare}
          className="block"
        >
          <FramePicture {...props} />
        </button>
      ) : (
        <FramePicture {...props} />
      )}
      <FrameName frame={frame} />
      <p className={placeClass(props)}>{placeText(props)}</p>
      <FrameReason {...props} />
    </li>
  );
}

/** The crop, with what marks it out in its corners. */
export function FramePicture({ projectId, frame, centre, size, isReference, isAsked }: BenchFrameProps) {
  return (
    <span
      data-frame={frame.id}
      style={{ width: size.widthPx, height: size.heightPx }}
      className={classNames(
        "relative block overflow-hidden bg-well",
        isAsked && "outline-3 -outline-offset-2 outline-dashed outline-ochre",
        frame.setAside !== null && !isAsked && "outline-2 -outline-offset-2 outline-dashed outline-paper",
      )}
    >
      <Crop projectId={projectId} frame={frame} centre={centre} size={size} alt="" />
      {isReference && <Label className="bg-ink text-paper">reference</Label>}
      {frame.setAside !== null && <Label className="bg-paper text-ink">set aside: {frame.setAside}</Label>}
      {centre?.isSameSpot === false && (
        <span className="absolute right-0 bottom-0 bg-paper px-1 text-[0.8125rem] leading-5">another spot</span>
      )}
    </span>
  );
}

export function FrameName({ frame }: { readonly frame: BoardFrame }) {
  return (
    <p className="figures mt-1 flex items-baseline gap-2">
      <span className="min-w-0 truncate font-bold" title={fileNames(frame)}>
        {frame.name}
      </span>
      <span className="ml-auto whitespace-nowrap">
        <span className="sr-only">sharpness </span>
        {sharpnessText(frame)}
      </span>
    </p>
  );
}

/** Why it is in this stack, while that is asked. */
export function FrameReason({ frame, isWhy }: BenchFrameProps) {
  if (!isWhy) return null;
  return (
    <p className="mt-1 text-quiet">
      {frame.reason} {frame.placedBy === "person" ? "A person put it here." : `${percent(frame.confidence)} sure.`}
    </p>
  );
}

/** How far it lies from the reference; empty for the reference itself. */
export function placeText({ frame, isReference, isAsked, isMeasuring }: BenchFrameProps): string {
  if (frame.stackId === null) return isAsked ? "under question" : "loose";
  if (isReference) return "\u00a0";
  if (isMeasuring) return "measuring";
  if (frame.shift === null) return "distance unknown";
  return `${distanceText(frame.shift)} ${isFarShifted(frame) ? "from the reference" : "away"}`;
}

export function placeClass({ frame, isAsked }: BenchFrameProps): string {
  return classNames("figures", isAsked || isFarShifted(frame) ? "text-ochre" : "text-quiet");
}

/** "HARB0019, sharpness 97 %, 2 px away, set aside: soft". */
export function frameLabel(props: BenchFrameProps): string {
  const { frame, isReference } = props;
  return [
    frame.name,
    ...(frame.relativeSharpness === null ? [] : [`sharpness ${percent(frame.relativeSharpness)}`]),
    isReference ? "reference" : placeText(props),
    ...(frame.setAside === null ? [] : [`set aside: ${frame.setAside}`]),
    ...(props.isAsked ? ["asked about"] : []),
  ].join(", ");
}

function sharpnessText({ relativeSharpness }: BoardFrame): string {
  return relativeSharpness === null ? "–" : percent(relativeSharpness);
}

/** Paper in the crop's corner, so that no text lies on the picture. */
function Label({ className, children }: { readonly className: string; readonly children: React.ReactNode }) {
  return (
    <span className={classNames("absolute top-0 left-0 px-1.5 text-[0.8125rem] leading-5 font-semibold", className)}>
      {children}
    </span>
  );
}

function fileNames(frame: BoardFrame): string {
  return frame.files.map((file) => (file.folder ? `${file.folder}/${file.name}` : file.name)).join(", ");
}
