export { EngineInputError } from './model/refusal';
export * from './model/inputs';
export { prepare, type Prepared } from './model/prepare';
export type { Allocate } from './model/memory';
export { course, takeFound, type Step } from './run/course';
export { perform, type Found, type Task } from './run/tasks';
export type { LayerValuation, ProgrammeValuation, Valuation } from './run/valuation';
export { openWorkspace, value } from './run/value';
export { Workspace, shareMemory, type SharedMemory } from './run/workspace';
