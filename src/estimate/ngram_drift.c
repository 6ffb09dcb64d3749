#include "estimate/ngram_drift.h"

#include <stdio.h>

/*
 * In 200 symbols the memory of a finite source is over; 200 x 100 blocks is
 * where the blocks themselves are so short that they do.
 */
#define PART_SYMBOLS_MIN 200
#define PARTS_MOST 8

size_t drift_parts(const struct sequence *sequence, const struct cuts *cuts)
{
	size_t parts = PARTS_MOST, length;

	if (!cuts->blocks || sequence->record_bytes)
		return 1;
	length = sequence->n / cuts->blocks;
	if (length >= DRIFT_BLOCK_SYMBOLS)
		return 1;
	while (parts > 1 && (length / parts < PART_SYMBOLS_MIN ||
			     cuts->blocks * parts > CUTS_BLOCKS_MAX))
		parts /= 2;
	return parts;
}

enum status drift_cuts_init(const struct cuts *cuts, size_t parts,
			    struct cuts *fine)
{
	struct cuts made = {.blocks = cuts->blocks * parts};

	TRY(memory_new(made.blocks + 1, sizeof(size_t), &made.symbol));
	for (size_t i = 0; i < cuts->blocks; i++) {
		size_t from = cuts->symbol[i];
		size_t length = cuts->symbol[i + 1] - from;

		for (size_t j = 0; j < parts; j++)
			made.symbol[i * parts + j] = from + length * j / parts;
	}
	made.symbol[made.blocks] = cuts->symbol[cuts->blocks];
	*fine = made;
	return STATUS_OK;
}

enum status drift_lag1_ppm(const struct cuts *fine, const int64_t *sum_q32,
			   int64_t *ppm)
{
	size_t parts = fine->blocks;
	wide_int n = (wide_int)fine->symbol[parts], total = 0;
	wide_int squares = 0, products = 0;
	int64_t *residual_q16;

	TRY(memory_new(parts, sizeof(*residual_q16), &residual_q16));
	for (size_t i = 0; i < parts; i++)
		total += sum_q32[i];
	for (size_t i = 0; i < parts; i++) {
		size_t symbols = fine->symbol[i + 1] - fine->symbol[i];
		wide_int mean = total * (wide_int)symbols / n;

		residual_q16[i] = q16_from_q32(sum_q32[i] - mean);
		squares += (wide_int)residual_q16[i] * residual_q16[i];
		if (i)
			products +=
				(wide_int)residual_q16[i] * residual_q16[i - 1];
	}
	memory_free(residual_q16);
	*ppm = squares ? (int64_t)(products * 1000000 / squares) : 0;
	return STATUS_OK;
}

static void key_of(unsigned order, char *key, size_t room)
{
	(void)snprintf(key, room, "lag1_ppm_%u", order);
}

void drift_note(struct findings *findings, unsigned order, int64_t ppm)
{
	char key[24];

	key_of(order, key, sizeof(key));
	findings_note(findings, key, ppm);
}

void drift_note_parts(struct findings *findings, size_t parts)
{
	findings_note(findings, "lag1_parts", (int64_t)parts);
}

bool drift_find(const struct findings *findings, unsigned order, double *lag1,
		double *parts)
{
	int64_t ppm, count;
	char key[24];

	key_of(order, key, sizeof(key));
	if (!findings_find(findings, key, &ppm) ||
	    !findings_find(findings, "lag1_parts", &count))
		return false;
	*lag1 = (double)ppm / 1e6;
	*parts = (double)count;
	return true;
}
