import { Picture } from "@/components/board/picture";
import { TilePeople } from "@/components/together/tile-people";
import type { BoardTile } from "@/lib/board/board-index";
import type { BoardLayout, PicturePart } from "@/lib/board/layout";
import { previewUrl, thumbnailUrl } from "@/lib/frames/picture-urls";

/** Long side of a thumbnail, px; a tile drawn larger takes the preview. */
const THUMBNAIL_PX = 320;
/** How far a thumbnail may be enlarged before it looks soft. */
const STRETCH = 1.4;

interface TilePictureProps {
  readonly projectId: string;
  readonly tile: BoardTile;
  readonly part: PicturePart;
  readonly layout: BoardLayout;
}

/** The tile's own part of its reference: the part that its neighbours do not show. */
export function TilePicture({ projectId, tile, part, layout }: TilePictureProps) {
  const { reference } = tile;
  const drawnWidthPx = layout.tileWidthPx / part.width;
  const url = drawnWidthPx > THUMBNAIL_PX * STRETCH ? previewUrl : thumbnailUrl;
  return (
    <span className="relative block overflow-hidden bg-well" style={{ height: layout.pictureHeightPx }}>
      {reference && (
        <Picture
          src={url(projectId, reference.id)}
          alt=""
          className="absolute"
          style={{
            width: `${100 / part.width}%`,
            height: `${100 / part.height}%`,
            left: `${(-100 * part.x) / part.width}%`,
            top: `${(-100 * part.y) / part.height}%`,
          }}
        />
      )}
      {layout.size !== "map" && <TilePeople tile={tile.name} />}
    </span>
  );
}
