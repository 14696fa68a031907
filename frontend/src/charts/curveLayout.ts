/** Room beside the drawing of a curve, px: for the words of its vertical axes, and for the end of the horizontal one. */
export const curveRoom = { left: 58, right: 10 } as const
