/** How often a property is tried: in Node, and less often in a page. */
export const propertyRuns = typeof document === "undefined" ? 250 : 40;
