/** Noise below this share of the level is numerical dust: growth is measured against it. */
export const DUST_SHARE = 1e-4;
