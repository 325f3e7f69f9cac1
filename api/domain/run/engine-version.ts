/** Goes into the hash of every run: moves whenever a number that the engine gives could move for the same inputs. */
export const ENGINE_VERSION = '2';
