#include "predict/plan.h"

#include "predict/predictor.h"
#include "predict/strands.h"

#include "base/log2.h"

#include <string.h>

/* Samples are this share of the bytes, within limits. */
#define SAMPLE_SHARE 64
#define SAMPLE_LEAST 8192
#define SAMPLE_MOST 98304

/*
 * In percent, by how much a family must beat the others on samples. Fields
 * learn faster than others, which catch up; lines are for numbers, and prose
 * is for letters, as far as samples do not tell them apart.
 */
#define FIELDS_HANDICAP 5
#define TEXT_HANDICAP 4
/* Digits in percent of bytes from which text is one of numbers. */
#define DIGITS_MANY 20

static bool has_stride(enum predict_family family)
{
	return family >= FAMILY_BINARY && family <= FAMILY_IMAGE;
}

int64_t plan_charge_q32(const struct predict_plan *plan)
{
	uint64_t options = FAMILY_COUNT;
	int64_t columns = 0;

	if (has_stride(plan->family))
		options *= STRIDE_MAX;
	if (plan->family == FAMILY_FIELDS)
		columns =
			(int64_t)log2_q32(COLUMN_BASES) * (int64_t)plan->stride;
	return (int64_t)log2_q32(options) + columns;
}

/* Share of bytes that text is made of, in percent. */
static unsigned text_percent(const uint64_t histogram[256], size_t count)
{
	uint64_t text = histogram['\n'] + histogram['\r'] + histogram['\t'];
	uint64_t high = 0;

	for (unsigned c = ' '; c < 127; c++)
		text += histogram[c];
	for (unsigned c = 128; c < 248; c++)
		high += histogram[c];
	/* Bytes of UTF-8 without a zero byte anywhere. */
	if (!histogram[0] && !histogram[255])
		text += high;
	return (unsigned)(text * 100 / count);
}

static unsigned digits_percent(const uint64_t histogram[256], size_t count)
{
	uint64_t digits = 0;

	for (unsigned c = '0'; c <= '9'; c++)
		digits += histogram[c];
	return (unsigned)(digits * 100 / count);
}

/* A plan on trial: how much its sample costs. */
struct trial {
	const struct plan_request *request;
	struct predict_plan best;
	int64_t least_q32;
	size_t sample;
	unsigned handicap[FAMILY_COUNT];
};

static MUST_USE enum status
try_plan(struct trial *trial, enum predict_family family, unsigned stride)
{
	const struct plan_request *request = trial->request;
	struct predict_plan plan = {.family = family, .stride = stride};
	size_t room = request->count - trial->sample;
	struct predictor *predictor;
	int64_t cost = 0;

	plan.bytes = trial->sample;
	if (family == FAMILY_FIELDS)
		fields_choose(&plan, request->bytes, request->count);
	TRY(predictor_new(&plan, &predictor));
	for (unsigned i = 1; i < 4; i += 2) {
		size_t from = room / 4 * i;

		/* Records begin where the strides of the whole do. */
		from -= from % stride;
		predictor_restart(predictor, request->bytes + from);
		cost += predictor_measure_q32(predictor, trial->sample);
	}
	predictor_free(predictor);
	cost += cost / 100 * trial->handicap[family];
	if (cost >= trial->least_q32)
		return STATUS_OK;
	trial->least_q32 = cost;
	trial->best = plan;
	return STATUS_OK;
}

static MUST_USE enum status try_binary(struct trial *trial)
{
	const struct plan_request *request = trial->request;
	size_t record = request->record_bytes;
	unsigned lag = lag_find(request->bytes, request->count, STRIDE_MAX);

	TRY(try_plan(trial, FAMILY_BINARY, lag));
	TRY(try_plan(trial, FAMILY_RECORDS, lag));
	if (lag <= COLUMNS_MAX)
		TRY(try_plan(trial, FAMILY_FIELDS, lag));
	if (lag >= 8)
		TRY(try_plan(trial, FAMILY_IMAGE, lag));
	if (record > 1 && record <= STRIDE_MAX && record != lag)
		TRY(try_plan(trial, FAMILY_RECORDS, (unsigned)record));
	return STATUS_OK;
}

enum status plan_choose(const struct plan_request *request,
			struct predict_plan *plan)
{
	struct trial trial = {.request = request,
			      .handicap[FAMILY_FIELDS] = FIELDS_HANDICAP};
	uint64_t histogram[256] = {0};
	size_t sample = request->count / SAMPLE_SHARE;
	bool text;

	for (size_t i = 0; i < request->count; i++)
		histogram[request->bytes[i]]++;
	sample = sample < SAMPLE_LEAST ? SAMPLE_LEAST : sample;
	sample = sample > SAMPLE_MOST ? SAMPLE_MOST : sample;
	trial.sample = sample < request->count ? sample : request->count;
	/* What does not fall below 8 bits a byte is left flat. */
	trial.best = (struct predict_plan){.family = FAMILY_FLAT, .stride = 1};
	trial.least_q32 = (int64_t)(16 * trial.sample) << 32;
	text = text_percent(histogram, request->count) > 97;
	if (bases_only(request->bytes, request->count)) {
		trial.best.family = FAMILY_BASES;
	} else if (text) {
		trial.handicap[digits_percent(histogram, request->count) >
					       DIGITS_MANY
				       ? FAMILY_PROSE
				       : FAMILY_LINES] = TEXT_HANDICAP;
		TRY(try_plan(&trial, FAMILY_PROSE, 1));
		TRY(try_plan(&trial, FAMILY_LINES, 1));
	} else {
		TRY(try_binary(&trial));
	}
	*plan = trial.best;
	plan->strength = request->strength;
	plan->bytes = request->count;
	if (request->page_bytes && request->page_bytes < request->count)
		plan->bytes = request->page_bytes;
	return STATUS_OK;
}
