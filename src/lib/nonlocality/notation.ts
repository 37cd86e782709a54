/**
 * The light public surface: subjects and their notations, without solvers or WebAssembly; safe in
 * the browser.
 */
export {
	addCoefficients,
	equalCoefficients,
	exactCoefficient,
	multiplyCoefficients,
	negateCoefficient,
	type Coefficient
} from './exact/coefficient';
export { COEFFICIENT_LIMITS, parseCoefficient } from './exact/expression';
export { NotationError, NotationLimitError } from './exact/notation-error';
export { plainNotation } from './exact/plain-notation';
export { printRational, rationalOfNumber, type Rational } from './exact/rational';
export { FORMAT } from './problem';
export type {
	ComplexMatrix,
	ComplexNumber,
	HybridModel,
	Level,
	Problem,
	ProblemBox,
	ProblemConstraint,
	ProblemOf,
	ProblemTerm,
	QuantityOfProblem,
	QuantumStrategy
} from './problem';
export { behaviourOfTable, type Behaviour } from './scenario/behaviour';
export { behaviourOfStrategy } from './scenario/strategy-behaviour';
export {
	EXPRESSION_LIMITS,
	parseExpression,
	type ExpressionOptions,
	type ReadExpression
} from './scenario/expression';
export { printExpression, type PrintOptions } from './scenario/expression-print';
export { PARTY_LETTERS } from './scenario/expression-tree';
export {
	FAMILIES,
	familyFunctional,
	familyInfo,
	familyLatex,
	familyTitle,
	type FamilyInfo,
	type FamilyName,
	type FamilySpec
} from './scenario/families';
export type { FamilyParameter } from './scenario/family-list';
export {
	collinsGisinForm,
	isRational,
	makeFunctional,
	scaleFunctional,
	type Functional,
	type Term
} from './scenario/functional';
export { coefficientLatex, printLatex, rationalLatex } from './scenario/latex';
export { largestDimensions } from './scenario/local-dimensions';
export {
	parseProbabilityTable,
	printProbabilityTable,
	splitProbabilities
} from './scenario/probability-table';
export { functionalOfTerms, termsOfFunctional } from './scenario/problem-terms';
export { partyCount, type Event, type Scenario } from './scenario/scenario';
export {
	TABLE_LIMITS,
	parseCollinsGisin,
	parseCorrelators,
	parseProbabilities,
	parseTableKey,
	printCollinsGisin,
	printCorrelators,
	printProbabilities,
	scenarioOfKeys,
	splitTable,
	tableKey,
	type TableCell
} from './scenario/tables';
