/** TAPWISE_PROPERTY_RUNS asks for more (or fewer) tries; a page has no environment. */
const asked = typeof process === "undefined" ? undefined : process.env["TAPWISE_PROPERTY_RUNS"];

/** How often a property is tried: in Node, and less often in a page. */
export const propertyRuns = asked === undefined ? (typeof document === "undefined" ? 250 : 40) : Number(asked);
