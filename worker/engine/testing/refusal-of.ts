import { EngineInputError, type OutsideDomain } from '../model/refusal';

/** A sentence for a person: it begins with a capital letter, ends with a stop and shows nothing of the code. */
const IN_WORDS = /^[A-Z].*[.]$/;
const OF_THE_CODE = /undefined|\[object|function|NaN;? /;

/** The refusal that an act ends in. Whatever else it throws is thrown on; an act that is not refused is an error. */
export function refusalOf(act: () => unknown): EngineInputError {
  try {
    act();
  } catch (error) {
    if (!(error instanceof EngineInputError)) throw error;
    const { message, outside } = error;
    const told = outside === null ? message : message.replace(String(outside.value), '');
    if (!IN_WORDS.test(message) || OF_THE_CODE.test(told)) throw new Error(`not in words: ${message}`);
    return error;
  }
  throw new Error('it was not refused');
}

/** The same, of a refusal that names parameter, value and bound. */
export function outsideOf(act: () => unknown): OutsideDomain {
  const { outside, message } = refusalOf(act);
  if (outside === null) throw new Error(`names no bound: ${message}`);
  const { parameter, value, bound } = outside;
  if (message !== `${parameter} is ${value}; it must be ${bound}.`)
    throw new Error(`says another thing: ${message}`);
  return outside;
}
