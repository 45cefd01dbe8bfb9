/** Magnetic constant in H/m. The exact pre-2019 value; the present one differs by 5e-10 relative. */
export const MU0 = 4e-7 * Math.PI;
