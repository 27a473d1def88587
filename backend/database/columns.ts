import { p } from '@mikro-orm/postgresql';
import { randomUUID } from 'node:crypto';

/** A random primary key: says nothing of order or time. */
export const id = () =>
  p
    .uuid()
    .primary()
    .onCreate(() => randomUUID());

/** The number that `If-Match` names; the ORM refuses the second of two simultaneous writes. */
export const revision = () => p.integer().version();

/** A JSON column with the type of what lies in it. */
export const json = <T>() => p.json().$type<T>();

/** A column of a closed list. */
export const oneOf = <const T extends string>(values: readonly T[]) => p.enum([...values]);
