/** Nothing of what the page watches can be kept by the browser. */
export function plain<Value>(value: Value): Value {
  return JSON.parse(JSON.stringify(value)) as Value;
}
