/** What is maximised, at one point: the gradient in coordinates of the tangent space there. */
export interface Slope {
	readonly value: number;
	readonly gradient: Float64Array;
}

export interface Landscape<Point> {
	slope(point: Point): Slope;
	/** The point reached from `point` along a tangent vector; the old one is left as it was. */
	move(point: Point, tangent: Float64Array): Point;
	/** Called at every evaluation; throws to stop. */
	poll(): void;
}

export interface Ascent<Point> {
	readonly point: Point;
	readonly value: number;
	/** Euclidean norm of the last gradient. */
	readonly gradientNorm: number;
}

/** Pairs of steps and changes of the gradient that are remembered. */
const MEMORY = 20;
/** Armijo's condition: share of the promised gain that a step must reach. */
const SUFFICIENT = 1e-4;
const MOST_HALVINGS = 40;
/** A step that gains less than this share of the value's size no more than rounds. */
const ROUNDING = 1e-16;

/**
 * Maximises a smooth function on a manifold by the limited-memory BFGS method, the tangent spaces
 * identified by their coordinates. The value never falls.
 * @see Nocedal, Math. Comput. 35, 773 (1980); Huang, Gallivan, Absil, SIAM J. Optim. 25, 1660 (2015)
 */
export function ascend<Point>(
	start: Point,
	landscape: Landscape<Point>,
	{ iterations, tolerance }: { iterations: number; tolerance: number }
): Ascent<Point> {
	let point = start;
	let { value, gradient } = landscape.slope(point);
	const pairs: Pair[] = [];
	for (let iteration = 0; iteration < iterations; iteration++) {
		if (norm(gradient) <= tolerance) break;
		let direction = quasiNewtonDirection(gradient, pairs);
		let promised = dot(direction, gradient);
		if (!(promised > 0)) {
			pairs.length = 0;
			direction = gradient.slice();
			promised = dot(direction, gradient);
		}
		// without memory the gradient has no scale: a first step of moderate length
		let step = pairs.length > 0 ? 1 : Math.min(1, 0.1 / norm(gradient));
		let next: { point: Point; slope: Slope } | null = null;
		for (let halving = 0; halving < MOST_HALVINGS; halving++, step /= 2) {
			landscape.poll();
			const moved = landscape.move(
				point,
				direction.map((entry) => step * entry)
			);
			const slope = landscape.slope(moved);
			if (!(slope.value >= value + SUFFICIENT * step * promised)) continue;
			next = { point: moved, slope };
			break;
		}
		if (!next) {
			if (pairs.length === 0) break;
			pairs.length = 0;
			continue;
		}
		const change = next.slope.gradient.map((entry, i) => (gradient[i] ?? 0) - entry);
		const move = direction.map((entry) => step * entry);
		const curvature = dot(move, change);
		if (curvature > 1e-12 * norm(move) * norm(change)) {
			pairs.push({ move, change, curvature });
			if (pairs.length > MEMORY) pairs.shift();
		}
		const gain = next.slope.value - value;
		({ point } = next);
		({ value, gradient } = next.slope);
		if (gain > ROUNDING * Math.abs(value)) continue;
		// the memory may be of another side of a kink: the gradient alone has the last word
		if (!pairs.length) break;
		pairs.length = 0;
	}
	return { point, value, gradientNorm: norm(gradient) };
}

interface Pair {
	readonly move: Float64Array;
	/** Old gradient less the new one: positive curvature where the function is concave. */
	readonly change: Float64Array;
	readonly curvature: number;
}

/** The two-loop recursion. */
function quasiNewtonDirection(gradient: Float64Array, pairs: readonly Pair[]): Float64Array {
	const out = gradient.slice();
	const shares = pairs.toReversed().map(({ move, change, curvature }) => {
		const share = dot(move, out) / curvature;
		add(out, -share, change);
		return share;
	});
	const last = pairs.at(-1);
	const scale = last ? last.curvature / dot(last.change, last.change) : 1;
	for (let i = 0; i < out.length; i++) out[i] = (out[i] ?? 0) * scale;
	pairs.forEach(({ move, change, curvature }, at) => {
		const share = shares[pairs.length - 1 - at] ?? 0;
		add(out, share - dot(change, out) / curvature, move);
	});
	return out;
}

function dot(a: Float64Array, b: Float64Array): number {
	let sum = 0;
	for (let i = 0; i < a.length; i++) sum += (a[i] ?? 0) * (b[i] ?? 0);
	return sum;
}

const norm = (a: Float64Array) => Math.sqrt(dot(a, a));

function add(target: Float64Array, factor: number, source: Float64Array): void {
	for (let i = 0; i < target.length; i++) target[i] = (target[i] ?? 0) + factor * (source[i] ?? 0);
}
