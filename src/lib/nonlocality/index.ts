/** The public surface: solvers, checks and canonical forms, for the server, threads and commands. */
export { sdpaText, solve } from './quantities/solve';
export { SOLVER } from './quantities/solver-version';
export { parseSdpa, SdpaError } from './optimization/sdpa-text';
export { verifyResult } from './certificates/verify';
export {
	affineMap,
	canonicalForm,
	DIGEST_VERSION,
	type CanonicalForm
} from './scenario/equivalence';
export { symmetryGroup, type SymmetryGroup } from './scenario/symmetry-group';
export type { Relabelling } from './scenario/relabelling';
export { FORMAT, SolverStop } from './problem';
export type {
	ComplexMatrix,
	ComplexNumber,
	Control,
	DoneResult,
	HybridModel,
	Level,
	Problem,
	ProblemBox,
	ProblemConstraint,
	ProblemOf,
	ProblemTerm,
	Progress,
	QuantityOfProblem,
	QuantumStrategy,
	Result,
	ResultStatus,
	UnfinishedResult
} from './problem';
export type {
	Certificate,
	CheckOutcome,
	DeterministicCertificate,
	EnclosureCertificate,
	ExactMomentCertificate,
	FacetCertificate,
	HybridBipartition,
	HybridCertificate,
	LinearProgrammeCertificate,
	LocalMixtureCertificate,
	MomentCertificate,
	StrategyCertificate
} from './certificates/types';
export type { Scenario, Event } from './scenario/scenario';
export type { Functional, Term } from './scenario/functional';
export type { Coefficient } from './exact/coefficient';
