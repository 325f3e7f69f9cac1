/** What was outside the domain of an engine function. */
export interface OutsideDomain {
  readonly parameter: string;
  readonly value: number | string;
  readonly bound: string;
}

/** The inputs cannot be priced; the message says what is wrong and is fit for a person to read. */
export class EngineInputError extends Error {
  constructor(
    message: string,
    readonly outside: OutsideDomain | null = null,
  ) {
    super(message);
    this.name = 'EngineInputError';
  }
}

/** Throws unless the condition holds, naming the parameter, its value and the bound that it breaks. */
export function demand(holds: boolean, parameter: string, value: number | string, bound: string): asserts holds {
  if (!holds) throw new EngineInputError(`${parameter} is ${value}; it must be ${bound}.`, { parameter, value, bound });
}
