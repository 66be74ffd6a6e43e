declare module 'convert-units' {
  interface From { to(unit: string): number }
  interface Value { from(unit: string): From }
  export default function convert(value: number): Value
}
