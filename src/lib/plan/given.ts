/** Sets a property only where there is a value, so that plain data stays plain. */
export function given<K extends string, V>(name: K, value: V | undefined): { [P in K]?: V } {
  return (value === undefined ? {} : { [name]: value }) as { [P in K]?: V };
}
