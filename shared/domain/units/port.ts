/** Which of the two ports of a cylinder. Never "left" and "right". */
export type Side = 'intake' | 'exhaust'

/** A port of the head: its cylinder, numbered from the timing end starting at 1, and its side. */
export interface PortRef { cylinder: number, side: Side }
