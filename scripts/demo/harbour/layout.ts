/** The harbour's measures, in px of the scene: wide enough for 6 tiles of 1500 px at 36 % overlap, high enough for 3 of 1000 px. */
export const SCENE_SIZE = { widthPx: 6460, heightPx: 2380 } as const;

/** Where the street on the quay meets the houses. */
export const STREET_Y = 1372;
/** Upper edge of the quay wall. */
export const QUAY_TOP_Y = 1418;
/** Foot of the quay wall, where the foreshore begins. */
export const QUAY_FOOT_Y = 1664;
/** How high the sea stands at high tide: weed grows below. */
export const HIGH_TIDE_Y = 1540;
/** Mean edge of the water at low tide. */
export const WATER_Y = 1846;
/** The far shore's water line, seen past the end of the quay. */
export const HORIZON_Y = 1290;
