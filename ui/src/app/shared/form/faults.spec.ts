import { FormArray, FormControl, FormGroup, Validators } from '@angular/forms';
import { ProblemError } from '../../core/problem';
import { faultOf, showFaults } from './faults';

function form() {
  const limit = new FormControl('0', { nonNullable: true });
  return { limit, form: new FormGroup({ layers: new FormArray([new FormGroup({ limit })]) }) };
}

describe('faults that the server found', () => {
  it('stand beside their fields; those of no field are handed back', () => {
    const { form: whole, limit } = form();
    const problem = new ProblemError(422, 'T', '', [
      { path: 'layers.0.limit', message: 'must be above 0' },
      { path: 'layers.4.limit', message: 'must be above 0' },
      { path: 'lossTableIds', message: 'must name at least one loss table' },
    ]);
    expect(showFaults(whole, problem).map((fault) => fault.path)).toEqual(['layers.4.limit', 'lossTableIds']);
    expect(faultOf(limit)).toBe('This must be above 0.');
    expect(limit.touched).toBe(true);
    limit.setValue('5');
    expect(faultOf(limit)).toBe('');
  });

  it('are sentences whatever their words', () => {
    const { form: whole, limit } = form();
    showFaults(
      whole,
      new ProblemError(422, 'T', '', [{ path: 'layers.0.limit', message: 'a broker belongs to a firm' }]),
    );
    expect(faultOf(limit)).toBe('A broker belongs to a firm.');
  });

  it('are said for the usual validators too', () => {
    expect(faultOf(new FormControl('', Validators.required))).toBe('Fill this in.');
    expect(faultOf(new FormControl('x', Validators.email))).toBe('This is not an e-mail address.');
  });
});
