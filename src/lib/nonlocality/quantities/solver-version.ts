/** Name and version of the solvers, stored with every result; it changes when results may get better. */
export const SOLVER = 'merestone 0.2.0';
