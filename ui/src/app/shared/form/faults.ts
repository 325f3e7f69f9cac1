import { FormArray, FormGroup, type AbstractControl, type ValidatorFn } from '@angular/forms';
import type { FieldFault, ProblemError } from '../../core/problem';

/** What is wrong with a control, in words; empty while it is right or not yet left. */
export function faultOf(control: AbstractControl): string {
  const errors = control.errors;
  if (errors === null) return '';
  // Validators of ours say their words themselves; so does the server.
  const words = Object.values(errors).find((one) => typeof one === 'string');
  if (typeof words === 'string') return words;
  if (control.hasError('required')) return 'Fill this in.';
  if (control.hasError('email')) return 'This is not an e-mail address.';
  if (control.hasError('maxlength')) return 'This is too long.';
  return 'This is not right.';
}

/** The contract's messages go on from the field's name: “must be above 0”. */
function sentence(message: string): string {
  const whole = /^(must|is|has|was|may|cannot)\b/.test(message)
    ? `This ${message}`
    : message.charAt(0).toUpperCase() + message.slice(1);
  return /[.!?]$/.test(whole) ? whole : `${whole}.`;
}

function childOf(control: AbstractControl, name: string): AbstractControl | null {
  if (control instanceof FormArray)
    return (control.controls as readonly AbstractControl[])[Number(name)] ?? null;
  if (control instanceof FormGroup)
    return (control.controls as Record<string, AbstractControl>)[name] ?? null;
  return null;
}

/**
 * Puts the faults the server found beside their fields (`layers.0.limit` finds its control by that path) and answers those
 * that belong to none, to be said above the form. A fault goes when its field is changed.
 */
export function showFaults(form: AbstractControl, problem: ProblemError): readonly FieldFault[] {
  return problem.errors.filter((fault) => {
    let found: AbstractControl | null = form;
    for (const name of fault.path.split('.')) found = found === null ? null : childOf(found, name);
    if (found === null || found === form) return true;
    found.setErrors({ ...found.errors, server: sentence(fault.message) });
    found.markAsTouched();
    return false;
  });
}

/** Decimal text above zero; what is no number is the amount input's business. */
export const aboveZero: ValidatorFn = (control) => {
  const text: unknown = control.value;
  return text !== '' && Number(text) <= 0 ? { aboveZero: 'This must be above 0.' } : null;
};

/** Puts faults beside their fields and answers what is left to be said above the form. */
export function sayFaults(form: AbstractControl, problem: ProblemError): readonly string[] {
  if (problem.errors.length === 0) return problem.words;
  return showFaults(form, problem).map((fault) => sentence(fault.message));
}
