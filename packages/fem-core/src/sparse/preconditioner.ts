/** z becomes an approximate solution of A z = r, by the same symmetric positive definite map each time; r stays. */
export type Preconditioner = (r: Float64Array, z: Float64Array) => void;
