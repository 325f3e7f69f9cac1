/** A stop that is not a fault of the program: its message is all that the person needs to read. */
class Refusal extends Error {
  /** @param {string} message */
  constructor(message) {
    super(message);
    this.name = 'Refusal';
  }
}

module.exports = { Refusal };
