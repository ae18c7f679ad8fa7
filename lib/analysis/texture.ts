/**
 * Standard deviation of fine detail, in levels of 255, from which a place counts as textured. Ours: clear sky and
 * defocused haze stay under 1 at 256 px, foliage, stone and roofs lie between 5 and 25.
 */
export const TEXTURE_LEVEL = 2;
