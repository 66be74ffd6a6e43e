import type { NumberBlock } from '../schemas/number-blocks'

/** The bench's block of numbers as it lies on its disk. */
export interface BenchNumbers {
  block: NumberBlock
  /** Codes that this bench has given to batches, whether or not the server knows of them yet. */
  given: string[]
}

/** Codes that the bench may still give, in order. */
export const freeCodes = (numbers: BenchNumbers | null): string[] =>
  numbers === null ? [] : numbers.block.codes.filter(code => !numbers.given.includes(code))

/** The block as the server just told it; what was given here stays given until the server knows of it. */
export const withBlock = (numbers: BenchNumbers | null, block: NumberBlock): BenchNumbers => ({
  block,
  given: (numbers?.given ?? []).filter(code => block.codes.includes(code)),
})

/** Takes the next code out of the block. */
export function takeCode(numbers: BenchNumbers | null): { code: string, numbers: BenchNumbers } | null {
  const [code] = freeCodes(numbers)
  return numbers === null || code === undefined ? null : { code, numbers: { ...numbers, given: [...numbers.given, code] } }
}

/** `B-0431 to B-0450`, of those that are free; null without any. */
export function freeRange(numbers: BenchNumbers | null): { first: string, last: string } | null {
  const free = freeCodes(numbers)
  const [first, last] = [free[0], free.at(-1)]
  return first === undefined || last === undefined ? null : { first, last }
}
