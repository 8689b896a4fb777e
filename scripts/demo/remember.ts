/**
 * Remembers what a pure function made of an object, by the fields that it read and their values: asked again with an
 * object that has the same in those fields, it answers at once, whatever the other fields say.
 */
export function remember<A extends object, R>(make: (argument: A) => R): (argument: A) => R {
  const known: { readonly read: ReadonlyMap<PropertyKey, unknown>; readonly result: R }[] = [];
  return (argument) => {
    const same = known.find(({ read }) =>
      [...read].every(([field, value]) => Object.is(Reflect.get(argument, field), value)),
    );
    if (same) return same.result;
    const read = new Map<PropertyKey, unknown>();
    const watched = new Proxy(argument, {
      get: (target, field) => {
        const value: unknown = Reflect.get(target, field);
        read.set(field, value);
        return value;
      },
    });
    const result = make(watched);
    known.push({ read, result });
    return result;
  };
}
