type Given<T> = { [Name in keyof T]?: Exclude<T[Name], undefined> };

/** The options that were given: an absent one leaves the library its default. */
export function given<T extends object>(options: T): Given<T> {
  return Object.fromEntries(Object.entries(options).filter(([, value]) => value !== undefined)) as Given<T>;
}
