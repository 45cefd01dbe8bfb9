/** Region between an outline with unbounded space round it and the circle that the mesh ends on; vacuum. */
export const OUTSIDE_REGION = '(outside)';
/** Region of the image of all that lies beyond that circle; vacuum. */
export const BEYOND_REGION = '(beyond)';
