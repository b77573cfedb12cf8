/** The two variants of the two-parameter valve model: what the stem does after a slip. */
export type ValveModel = 'slides-on' | 'sticks-again';
