/** What is meshed, and what is refused with a fault that states these figures. */

/** Points nearer than this share of the section's size (the longer of width and height of the outline) are one. */
export const SNAP = 1e-9;

/** Size of an outline, metres. */
export const MIN_SIZE = 1e-10;
export const MAX_SIZE = 1e10;

/**
 * Distance of the outline's centre from the origin, and of anything drawn from that centre, in sizes of the outline. Numbers
 * there are 1e-11 of the size apart, a hundredth of the snapping distance.
 */
export const MAX_OFFSET = 1e5;

/** Straight and round pieces that the borders of all shapes have together: one a polygon side, sixteen a circle. */
export const MAX_PIECES = 200_000;

/** Pairs of pieces whose boxes meet; reached only where thousands of long lines cross each other. */
export const MAX_MEETINGS = 3_000_000;

/** Points at which drawn lines end or meet. */
export const MAX_POINTS = 300_000;
