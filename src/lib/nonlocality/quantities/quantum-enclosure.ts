import type {
	DeterministicCertificate,
	EnclosureCertificate,
	ExactMomentCertificate,
	MomentCertificate,
	StrategyCertificate
} from '../certificates/types';
import { SolverStop, type Level } from '../problem';

/** The best two sides known so far, each with what proves it. */
export class QuantumEnclosure {
	lower: number | null = null;
	upper: number | null = null;
	#lowerCertificate: DeterministicCertificate | StrategyCertificate | null = null;
	#upperCertificate: MomentCertificate | ExactMomentCertificate | null = null;
	#upperLevel: Level | null = null;

	/** The lower side, -Infinity while there is none. */
	get floor(): number {
		return this.lower ?? -Infinity;
	}

	/** The upper side, Infinity while there is none. */
	get ceiling(): number {
		return this.upper ?? Infinity;
	}

	raise(lower: number, certificate: DeterministicCertificate | StrategyCertificate): boolean {
		if (!(lower > this.floor)) return false;
		this.lower = lower;
		this.#lowerCertificate = certificate;
		this.#expectOrder();
		return true;
	}

	reduce(
		upper: number,
		certificate: MomentCertificate | ExactMomentCertificate,
		level: Level
	): boolean {
		if (!(upper < this.ceiling)) return false;
		this.upper = upper;
		// Feasible moments bound the relaxation from below, not the quantum maximum.
		this.#upperCertificate = { ...certificate, moments: null, feasibleValue: null };
		this.#upperLevel = level;
		this.#expectOrder();
		return true;
	}

	get width(): number {
		return this.ceiling - this.floor;
	}

	/** `local` when no quantum strategy found is better than the best deterministic one. */
	get lowerFrom(): 'local' | 'see-saw' | null {
		if (!this.#lowerCertificate) return null;
		return this.#lowerCertificate.kind === 'deterministic-strategy' ? 'local' : 'see-saw';
	}

	get upperLevel(): Level | null {
		return this.#upperLevel;
	}

	certificate(): EnclosureCertificate {
		return {
			kind: 'enclosure',
			lower: this.#lowerCertificate,
			upper: this.#upperCertificate,
			upperLevel: this.#upperLevel
		};
	}

	/** Both sides are proved: a crossing is a defect of ours, never a result. */
	#expectOrder(): void {
		if (this.width < 0)
			throw new SolverStop(
				'failed',
				`the lower side ${this.lower} exceeds the upper side ${this.upper}: the solvers contradict each other`
			);
	}
}
