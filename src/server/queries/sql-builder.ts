/** Collects bound values while a statement is put together: `value(x)` answers `$1`, `$2` … and never writes the value itself. */
export function sqlBuilder(): { readonly value: (value: unknown) => string; readonly values: unknown[] } {
  const values: unknown[] = [];
  return {
    values,
    value: (value) => {
      values.push(value);
      return `$${values.length}`;
    },
  };
}
