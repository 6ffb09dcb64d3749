/* The rate of a hidden source from the motion of the belief. */
#include "base/memory.h"
#include "source/linear.h"
#include "source/model_rate.h"

#include <math.h>

/*
 * Blackwell 1957: the belief b_t = P(regime | symbols so far), with the context
 * c_t, is a Markov process, and the rate is the mean under its stationary law
 * of r(b, c) = H(next symbol | b, c). With T the transfer operator,
 * (T g)(b, c) = sum_x p_x(b, c) g(b after x, next(c, x)),
 * that mean h is the one constant for which v - T v = r - h has a solution.
 * The functions are smooth, so that v is held by its values at Chebyshev
 * points and read between them by barycentric interpolation (Berrut and
 * Trefethen 2004); the equations at the points, and v = 0 at the first of them,
 * settle v and h.
 *
 * After the moves no regime is certain, and entropies are smooth in the log
 * odds of the belief on a strip that does not shrink with the moves'
 * probabilities. So the coordinates are the log odds of b_0 and, with three
 * regimes, of b_1 in b_1 + b_2, each over the range that the rows of the moves
 * span.
 */
#define POINTS_MAX 256
/* Elimination takes seconds beyond. */
#define UNKNOWNS_MAX 2048
/* Where a move never happens the odds are cut here. */
#define ODDS_MAX 1e12
static const double pi = 3.14159265358979323846;

struct grid {
	const struct emissions *emissions;
	uint32_t points; /* a coordinate */
	uint32_t nodes;  /* points, or their square */
	double low[2], high[2];
	double x[POINTS_MAX], weight[POINTS_MAX]; /* on [0, 1] */
};

static double log_odds(double part, double rest)
{
	if (part * ODDS_MAX <= rest)
		return -log(ODDS_MAX);
	if (rest * ODDS_MAX <= part)
		return log(ODDS_MAX);
	return log(part / rest);
}

static double coordinate(const struct grid *grid, unsigned which,
			 const double *belief)
{
	if (which == 1)
		return log_odds(belief[1], belief[2]);
	return log_odds(belief[0], grid->emissions->regimes == 2
					   ? belief[1]
					   : belief[1] + belief[2]);
}

static void ranges_find(struct grid *grid)
{
	const struct emissions *emissions = grid->emissions;

	for (unsigned which = 0; which + 1 < emissions->regimes; which++) {
		double low = HUGE_VAL, high = -HUGE_VAL;

		for (uint32_t r = 0; r < emissions->regimes; r++) {
			double at =
				coordinate(grid, which, emissions->moves[r]);

			low = fmin(low, at);
			high = fmax(high, at);
		}
		/* Moves that do not depend on the regime span a point. */
		grid->low[which] = low - 1e-3;
		grid->high[which] = high + 1e-3;
	}
}

static void grid_init(struct grid *grid, const struct emissions *emissions,
		      uint32_t points)
{
	grid->emissions = emissions;
	grid->points = points;
	grid->nodes = emissions->regimes == 2 ? points : points * points;
	ranges_find(grid);
	for (uint32_t i = 0; i < points; i++) {
		grid->x[i] = .5 - .5 * cos(pi * i / (points - 1));
		grid->weight[i] = i % 2 ? -1 : 1;
		if (i == 0 || i == points - 1)
			grid->weight[i] /= 2;
	}
}

/* The share of each point in the value at x. */
static void shares(const struct grid *grid, double x, double *out)
{
	double sum = 0;

	for (uint32_t i = 0; i < grid->points; i++) {
		double d = x - grid->x[i];

		if (fabs(d) < 1e-15) {
			for (uint32_t j = 0; j < grid->points; j++)
				out[j] = j == i;
			return;
		}
		out[i] = grid->weight[i] / d;
		sum += out[i];
	}
	for (uint32_t i = 0; i < grid->points; i++)
		out[i] /= sum;
}

static void belief_at(const struct grid *grid, uint32_t node, double *belief)
{
	double u = grid->x[node % grid->points];
	double v = grid->x[node / grid->points];

	u = grid->low[0] + u * (grid->high[0] - grid->low[0]);
	belief[0] = 1 / (1 + exp(-u));
	belief[1] = 1 / (1 + exp(u));
	if (grid->emissions->regimes == 3) {
		double rest = belief[1];

		v = grid->low[1] + v * (grid->high[1] - grid->low[1]);
		belief[1] = rest / (1 + exp(-v));
		belief[2] = rest / (1 + exp(v));
	}
}

static void shares_of(const struct grid *grid, unsigned which,
		      const double *belief, double *out)
{
	double at = (coordinate(grid, which, belief) - grid->low[which]) /
		    (grid->high[which] - grid->low[which]);

	shares(grid, fmin(fmax(at, 0), 1), out);
}

/* Takes p times the value at the belief off the row's coefficients of v. */
static void value_take(const struct grid *grid, const double *belief, double p,
		       double *row)
{
	double over_u[POINTS_MAX], over_v[POINTS_MAX] = {1};
	uint32_t lines = grid->nodes / grid->points;

	shares_of(grid, 0, belief, over_u);
	if (lines > 1)
		shares_of(grid, 1, belief, over_v);
	for (uint32_t j = 0; j < lines; j++) {
		double share = p * over_v[j];

		for (uint32_t i = 0; i < grid->points; i++)
			row[j * grid->points + i] -= share * over_u[i];
	}
}

/* One equation: v - T v + h = r at (node, context). */
static void equation(const struct grid *grid, uint32_t context, uint32_t node,
		     double *row, double *right)
{
	const struct emissions *emissions = grid->emissions;
	double belief[MODEL_REGIMES_MAX], joint[MODEL_REGIMES_MAX];
	double after[MODEL_REGIMES_MAX];

	belief_at(grid, node, belief);
	row[(size_t)context * grid->nodes + node] += 1;
	row[(size_t)emissions->contexts * grid->nodes] = 1;
	*right = 0;
	for (uint32_t x = 0; x < emissions->alphabet; x++) {
		double p = emissions_see(emissions, context, x, belief, joint);
		uint32_t next =
			emissions->next[context * emissions->alphabet + x];

		if (!(p > 0))
			continue;
		emissions_move(emissions, joint, after);
		value_take(grid, after, p, row + (size_t)next * grid->nodes);
		*right -= p * log2(p);
	}
}

static enum status grid_rate(const struct grid *grid, double *bits)
{
	size_t unknowns = (size_t)grid->emissions->contexts * grid->nodes + 1;
	double *matrix = NULL, *right = NULL;
	enum status status = STATUS_NO_MEMORY;

	if (memory_new_zeroed(unknowns * unknowns, sizeof(*matrix), &matrix) ||
	    memory_new_zeroed(unknowns, sizeof(*right), &right))
		goto out;
	for (uint32_t c = 0; c < grid->emissions->contexts; c++) {
		for (uint32_t i = 0; i < grid->nodes; i++) {
			size_t at = (size_t)c * grid->nodes + i;

			equation(grid, c, i, matrix + at * unknowns,
				 right + at);
		}
	}
	matrix[(unknowns - 1) * unknowns] = 1;
	status = linear_solve(matrix, right, unknowns);
	if (status == STATUS_OK)
		*bits = right[unknowns - 1];
out:
	memory_free(matrix);
	memory_free(right);
	return status;
}

enum status belief_rate(const struct emissions *emissions,
			struct known_rate *rate, struct reason *why)
{
	static const uint32_t two[] = {12, 18,  26,  40,  60,
				       90, 135, 200, 256, 0};
	static const uint32_t three[] = {6, 9, 13, 18, 24, 32, 42, 0};
	const uint32_t *points = emissions->regimes == 2 ? two : three;
	struct grid grid;
	double before = 0, bits, change = HUGE_VAL;

	for (; *points && change > 1e-8; points++) {
		enum status status;

		grid_init(&grid, emissions, *points);
		if ((size_t)grid.nodes * emissions->contexts > UNKNOWNS_MAX)
			break;
		status = grid_rate(&grid, &bits);
		if (status == STATUS_NO_MEMORY)
			return reason_give(why, status,
					   "no memory for a grid of %u beliefs",
					   grid.nodes);
		if (status != STATUS_OK)
			return reason_give(why, status,
					   "the belief does not settle");
		change = fabs(bits - before);
		before = bits;
	}
	if (change >= HUGE_VAL)
		return reason_give(why, STATUS_BAD_INPUT,
				   "%u regimes with %u contexts are too many "
				   "for a grid of beliefs",
				   emissions->regimes, emissions->contexts);
	if (!(change < 1e-7))
		return reason_give(why, STATUS_BAD_INPUT,
				   "the rate of this hidden source is known to "
				   "%g bits only",
				   change);
	*rate = (struct known_rate){before, change};
	return STATUS_OK;
}
