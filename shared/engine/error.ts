/**
 * Bad input to the engine. The server answers it as 400, a form shows `message` beside `field`.
 * `message` never repeats the value that was refused.
 */
export class EngineError extends Error {
  override readonly name = 'EngineError'

  constructor(
    /** Stable, kebab-case, for machines: `density-missing`. */
    readonly code: string,
    /** Path of the input with dots: `mix.components.0.parts`. */
    readonly field: string,
    message: string,
  ) {
    super(message)
  }
}
