/** How long a thread waits for others at a time, before it looks whether they live, in milliseconds. */
export const napMilliseconds = 50;

/** A worker that does not move for this long, or for twenty times as long as the whole run should take, is given up. */
const leastPatience = 2000;

export const patienceFor = (predictedMilliseconds: number): number => Math.max(leastPatience, 20 * predictedMilliseconds);
