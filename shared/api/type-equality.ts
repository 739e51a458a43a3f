/** Type-level checks that a zod schema and a hand-written contract say the same. Nothing of this exists at run time. */
type DeepReadonly<T> = T extends readonly (infer U)[]
  ? readonly DeepReadonly<U>[]
  : T extends object
    ? { readonly [K in keyof T]: DeepReadonly<T[K]> }
    : T;
type Identical<A, B> = (<T>() => T extends A ? 1 : 2) extends <T>() => T extends B ? 1 : 2 ? true : false;
/** True when A and B have the same fields of the same types, `readonly` aside. */
export type SameShape<A, B> = Identical<DeepReadonly<A>, DeepReadonly<B>>;
/** Fails to compile unless its argument is `true`. */
export type Holds<T extends true> = T;
