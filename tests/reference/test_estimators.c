/* Do the entropy estimates meet values published or computed elsewhere? */
#include "estimate/corrections.h"
#include "estimate/ngram_tables.h"

#include "base/memory.h"
#include "base/sum.h"
#include "support/grams.h"
#include "support/near.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#define LN2 0.69314718055994531
#define COUNT_OF(list) (sizeof(list) / sizeof(*(list)))

/* The facts at order 1 of a sequence in which symbol i stands counts[i] times.
 */
static struct gram_counts observed(const unsigned *counts, size_t kinds)
{
	uint8_t codes[256] = {0};
	struct findings findings;
	struct gram_counts all;
	struct sequence sequence;
	size_t n = 0;

	for (size_t i = 0; i < kinds; i++) {
		memset(codes + n, (int)i, counts[i]);
		n += counts[i];
	}
	sequence = grams_sequence(codes, n, 1);
	findings = grams_findings(&sequence, 1, NULL);
	all = findings.orders[0].all;
	findings_release(&findings);
	return all;
}

/* Sums are kept in 2^-16 bits, so an entropy is known to half that over N. */
static double rounding(const struct gram_counts *counts)
{
	return 0x1p-17 / (double)counts->positions + 1e-10;
}

static const unsigned eleven[] = {4, 2, 3, 0, 2, 4, 0, 0, 2, 1, 1};
static const unsigned five[] = {2, 1, 1, 1, 1};

/* Two programs, in R and in Python, agree on all digits shown (nats, then
 * bits); formulas: Miller 1955, Grassberger 2003, Chao, Wang, Jost 2013. */
static void eleven_classes(void **state)
{
	struct gram_counts counts = observed(eleven, COUNT_OF(eleven));
	double tolerance = rounding(&counts);
	struct corrected h;

	(void)state;
	corrected_from_counts(&counts, HUGE_VAL, &h);
	assert_near(h.plugin, 1.968382408728 / LN2, tolerance);
	assert_near(h.miller_madow, 2.152592935044 / LN2, tolerance);
	assert_near(h.grassberger, 2.144626386031 / LN2, tolerance);
	assert_near(h.plugin, 2.839776, tolerance + 5e-7);
	assert_near(h.miller_madow, 3.105535, tolerance + 5e-7);
	assert_near(h.grassberger, 3.094042, tolerance + 5e-7);
	assert_near(h.chao_wang_jost, 3.169768, tolerance + 5e-7);
	assert_near(coverage_good_turing(&counts), .894736842105, 1e-12);
	assert_near(coverage_chao_jost(&counts), .909774436090, 1e-12);
}

/* 3.635 bits is the documentation example of a published implementation of
 * Chao, Wang, Jost (from memory); the rest recomputed by exact arithmetic. */
static void mostly_single_counts(void **state)
{
	struct gram_counts counts = observed(five, COUNT_OF(five));
	double tolerance = rounding(&counts) + 5e-7;
	struct corrected h;

	(void)state;
	corrected_from_counts(&counts, HUGE_VAL, &h);
	assert_near(h.chao_wang_jost, 3.635, 5e-4);
	assert_near(h.chao_wang_jost, 3.634534, tolerance);
	assert_near(h.plugin, 2.251629, tolerance);
	assert_near(h.miller_madow, 2.732528, tolerance);
	assert_near(h.grassberger, 3.455912, tolerance);
}

/* Plug-in: SciPy 1.10.1 stats.entropy; Chao1: scikit-bio, bias-corrected. */
static void eight_classes(void **state)
{
	const unsigned counts[] = {10, 5, 3, 1, 1, 0, 2, 1};
	struct gram_counts facts = observed(counts, COUNT_OF(counts));
	struct corrected h;

	(void)state;
	corrected_from_counts(&facts, HUGE_VAL, &h);
	assert_near(h.plugin, 2.280787654949452, rounding(&facts));
	assert_near(support_chao1(&facts), 8.5, 1e-12);
}

/* Grassberger's value exceeds one bit on two classes of five; recomputed by
 * exact arithmetic: 1.3075. Cut where the alphabet is known. */
static void a_ceiling_cuts_the_overshoot(void **state)
{
	const unsigned counts[] = {5, 5};
	struct gram_counts facts = observed(counts, 2);
	struct corrected h;

	(void)state;
	corrected_from_counts(&facts, HUGE_VAL, &h);
	assert_near(h.grassberger, 1.3075, 5e-5);
	corrected_from_counts(&facts, 1, &h);
	assert_near(h.grassberger, 1, 0);
}

/* Nothing unseen is assumed: without single counts, with one, with no pairs. */
static void edges_of_the_unseen_part(void **state)
{
	const unsigned none[] = {3, 3}, one[] = {3, 1}, single[] = {1};
	struct gram_counts facts = observed(none, 2);
	struct corrected h;

	(void)state;
	/* psi(6) - psi(3) = 1/3 + 1/4 + 1/5 (6.3.2 of Abramowitz, Stegun). */
	corrected_from_counts(&facts, HUGE_VAL, &h);
	assert_near(h.chao_wang_jost, (1. / 3 + 1. / 4 + 1. / 5) / LN2,
		    rounding(&facts));
	assert_near(coverage_chao_jost(&facts), 1, 0);
	/* (3/4)(1/3) + (1/4)(1 + 1/2 + 1/3), A = 1. */
	facts = observed(one, 2);
	corrected_from_counts(&facts, HUGE_VAL, &h);
	assert_near(h.chao_wang_jost, (1. / 4 + 11. / 24) / LN2,
		    rounding(&facts));
	facts = observed(single, 1);
	corrected_from_counts(&facts, HUGE_VAL, &h);
	assert_near(h.chao_wang_jost, 0, rounding(&facts));
	assert_near(coverage_chao_jost(&facts), 0, 0);
}

/* sum over r >= N of (1-a)^(r-N+1) / r = (1-a)/N 2F1(1, N; N+1; 1-a), the
 * latter recomputed to 60 digits, and by quadrature. */
static void the_unseen_tail(void **state)
{
	static const struct {
		double positions, a, wanted;
	} table[] = {
		{6, 1e-18, 39.163198340559489},
		{6, 1e-6, 11.532239885710047},
		{6, 1e-3, 4.6526336373342631},
		{6, 0.02, 1.9102515900887384},
		{6, 0.049, 1.2418418657467624},
		{6, 0.051, 1.2147648170445217},
		{6, 0.3, 0.3034477955173598},
		{6, 0.9, 0.018232449296789412},
		{19, 1e-12, 24.135913038184681},
		{19, 0.02, 1.0765872272599115},
		{100, 1e-18, 36.269154156253206},
		{100, 1e-3, 2.0172330402882576},
		{100, 0.049, 0.16619859291842926},
		{10000, 1e-18, 31.659025637848767},
		{10000, 1e-6, 4.0785568861294891},
		{10000, 1e-3, 0.091479580044445451},
		{10000, 0.02, 0.0048762242374958216},
		{10000, 0.3, 0.00023327891971481796},
		{1e6, 1e-18, 27.053805951055152},
		{1e6, 1e-12, 13.238309631351349},
		{1e6, 1e-6, 0.59634706414932142},
		{1e6, 1e-3, 0.00099800398804577729},
		{1e6, 0.049, 1.940778660350178e-5},
		{1e9, 1e-18, 20.146050193690928},
		{1e9, 1e-12, 6.3378740708186533},
		{1e9, 1e-6, 0.00099900099601889768},
		{1e9, 1e-3, 9.9899900200099498e-7},
		{1e9, 0.049, 1.9408162888629335e-8},
		{1e9, 0.3, 2.333333327888889e-9},
		{1e9, 0.9, 1.111111110987654e-10},
	};

	(void)state;
	for (size_t i = 0; i < COUNT_OF(table); i++)
		assert_near(unseen_tail(table[i].positions, table[i].a) /
				    table[i].wanted,
			    1, 1e-12);
	assert_near(unseen_tail(6, 1), 0, 0);
}

/* Grassberger 2003, physics/0307138 (from memory): G(1) … G(8). */
static void grassbergers_function(void **state)
{
	const double wanted[] = {-1.2703628455, .7296371545,  .7296371545,
				 1.3963038212,  1.3963038212, 1.7963038212,
				 1.7963038212,  2.0820181069};
	struct count_logs *table;

	(void)state;
	assert_int_equal(count_logs_table(&table), STATUS_OK);
	for (size_t c = 1; c <= 8; c++)
		assert_near((double)table[c].grassberger_q56 * 0x1p-56 * LN2,
			    wanted[c - 1], 6e-11);
	memory_free(table);
}

/* psi(c) = -gamma + 1 + 1/2 + … + 1/(c-1), and G(c) = -gamma - ln 2 +
 * 2 (1 + 1/3 + … + 1/(c-1)) for even c; gamma: OEIS A001620, from memory. */
static void series_meet_the_sums(void **state)
{
	struct sum psi = {-0.57721566490153286, 0};
	struct sum grassberger = {-0.57721566490153286 - LN2, 0};

	(void)state;
	for (uint64_t c = 2; c < 3000; c += 2) {
		struct count_logs logs;

		if (c > 2)
			sum_add(&psi, 1 / (double)(c - 2));
		sum_add(&psi, 1 / (double)(c - 1));
		sum_add(&grassberger, 2 / (double)(c - 1));
		if (c < COUNT_LOGS_TABLED)
			continue;
		logs = count_logs_large(c);
		assert_near((double)logs.psi_q56 * 0x1p-56 * LN2,
			    sum_value(&psi), 1e-14);
		assert_near((double)logs.grassberger_q56 * 0x1p-56 * LN2,
			    sum_value(&grassberger), 1e-14);
	}
}

/* The series for large counts continues the table: psi(c+1) = psi(c) + 1/c,
 * G(c+2) = G(c) + 2/(c+1) for even c. */
static void series_meet_the_recursions(void **state)
{
	(void)state;
	for (uint64_t c = COUNT_LOGS_TABLED; c < 3000000000; c += c / 9 * 2) {
		struct count_logs here = count_logs_large(c);
		struct count_logs next = count_logs_large(c + 1);
		struct count_logs second = count_logs_large(c + 2);
		double real = (double)c;

		assert_near((double)(next.psi_q56 - here.psi_q56) * 0x1p-56,
			    1 / (real * LN2), 1e-14);
		assert_near((double)(second.grassberger_q56 -
				     here.grassberger_q56) *
				    0x1p-56,
			    2 / ((real + 1) * LN2), 1e-14);
		assert_int_equal(next.grassberger_q56, here.grassberger_q56);
	}
}

static double order_zero(const uint8_t *codes, size_t n, unsigned width)
{
	struct sequence sequence = grams_sequence(codes, n, width);
	struct findings findings = grams_findings(&sequence, 1, NULL);
	struct corrected h;

	corrected_from_counts(&findings.orders[0].all, HUGE_VAL, &h);
	findings_release(&findings);
	return h.plugin;
}

/* Cover and Thomas, examples 2.1.1 and 2.2.1 (from memory): X has marginals
 * 1/2 1/4 1/8 1/8; H(X) = 7/4, H(Y) = 2, H(X,Y) = 27/8 bits; so H(X|Y) = 11/8,
 * H(Y|X) = 13/8, I = 3/8. Here as 32 symbols, and as pairs of two bytes. */
static void the_joint_table_of_cover_and_thomas(void **state)
{
	const unsigned joint[4][4] = {
		{4, 2, 1, 1}, {2, 4, 1, 1}, {2, 2, 2, 2}, {8, 0, 0, 0}};
	uint8_t x[32], y[32], both[64];
	double hx, hy, hxy;
	size_t n = 0;

	(void)state;
	for (unsigned row = 0; row < 4; row++) {
		for (unsigned column = 0; column < 4; column++) {
			for (unsigned i = 0; i < joint[row][column]; i++) {
				x[n] = both[2 * n] = (uint8_t)column;
				y[n] = both[2 * n + 1] = (uint8_t)row;
				n++;
			}
		}
	}
	assert_int_equal(n, 32);
	hx = order_zero(x, 32, 1);
	hy = order_zero(y, 32, 1);
	hxy = order_zero(both, 32, 2);
	assert_near(hx, 7. / 4, 0);
	assert_near(hy, 2, 0);
	assert_near(hxy, 27. / 8, 0);
	assert_near(hxy - hy, 11. / 8, 0);
	assert_near(hxy - hx, 13. / 8, 0);
	assert_near(hx + hy - hxy, 3. / 8, 0);
}

/* Entropy of the Poisson law, recomputed by exact arithmetic; counts as near
 * to it as 2^36 positions allow. */
static void poisson_entropies(void **state)
{
	static const struct {
		double mean, bits;
	} table[] = {
		{1, 1.8824894320}, {10, 3.6953334113}, {100, 5.3678153452}};

	(void)state;
	for (size_t i = 0; i < COUNT_OF(table); i++) {
		struct gram_counts facts = {0};
		wide_int plugin_q32 = 0;
		struct corrected h;

		for (int k = 0; k < 300; k++) {
			double p = exp(k * log(table[i].mean) - table[i].mean -
				       lgamma(k + 1));
			uint64_t c = (uint64_t)llround(p * 0x1p36);

			plugin_q32 += (wide_int)c * (wide_int)log2_q32(c);
			facts.positions += c;
		}
		facts.plugin_q16 = q16_from_q32(plugin_q32);
		corrected_from_counts(&facts, HUGE_VAL, &h);
		assert_near(h.plugin, table[i].bits, 1e-8);
	}
}

/* E[plug-in] over multinomial samples of N: log2 N - (1/N) sum of the means of
 * c log2 c, each c binomial. */
static double mean_plugin(const double *p, size_t kinds, unsigned positions)
{
	struct count_logs *table;
	struct sum sum = {0};
	double n = positions;

	assert_int_equal(count_logs_table(&table), STATUS_OK);
	for (size_t i = 0; i < kinds; i++) {
		for (unsigned c = 1; c <= positions; c++) {
			double weight = exp(lgamma(n + 1) - lgamma(c + 1.0) -
					    lgamma(n - c + 1) + c * log(p[i]) +
					    (n - c) * log1p(-p[i]));

			sum_add(&sum, weight * c * (double)table[c].plain_q32 *
					      0x1p-32);
		}
	}
	memory_free(table);
	return log2(n) - sum_value(&sum) / n;
}

/* Recomputed by exact arithmetic; the expansions of Miller 1955 and Harris
 * 1975 give 1.728107 bits and 1.308169 nats. */
static void expected_plugin_entropy(void **state)
{
	const double dyadic[] = {.5, .25, .125, .125};
	const double uniform[] = {.25, .25, .25, .25};

	(void)state;
	assert_near(mean_plugin(dyadic, 4, 100), 1.728089, 6e-7);
	assert_near(mean_plugin(uniform, 4, 20) * LN2, 1.307260, 6e-7);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(eleven_classes),
		cmocka_unit_test(mostly_single_counts),
		cmocka_unit_test(eight_classes),
		cmocka_unit_test(a_ceiling_cuts_the_overshoot),
		cmocka_unit_test(edges_of_the_unseen_part),
		cmocka_unit_test(the_unseen_tail),
		cmocka_unit_test(grassbergers_function),
		cmocka_unit_test(series_meet_the_sums),
		cmocka_unit_test(series_meet_the_recursions),
		cmocka_unit_test(the_joint_table_of_cover_and_thomas),
		cmocka_unit_test(poisson_entropies),
		cmocka_unit_test(expected_plugin_entropy),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
