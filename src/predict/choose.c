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

/* Plans tried at most, and samples each is tried on. */
#define CANDIDATES 6
#define SAMPLES 2
/* In percent, how far behind the best one goes on to the next sample. */
#define CLOSE 8

struct candidate {
	enum predict_family family;
	unsigned stride;
	int64_t cost_q32; /* of the samples so far */
	bool out;
};

/* Plans on trial: how much their samples cost. */
struct trial {
	const struct plan_request *request;
	struct candidate candidate[CANDIDATES];
	unsigned candidates;
	size_t sample;
	unsigned handicap[FAMILY_COUNT];
};

static void enter(struct trial *trial, enum predict_family family,
		  unsigned stride)
{
	struct candidate *candidate = &trial->candidate[trial->candidates++];

	*candidate = (struct candidate){.family = family, .stride = stride};
}

static struct predict_plan plan_of(const struct plan_request *request,
				   const struct candidate *candidate)
{
	struct predict_plan plan = {.family = candidate->family,
				    .stride = candidate->stride};

	if (plan.family == FAMILY_FIELDS)
		fields_choose(&plan, request->bytes, request->count);
	return plan;
}

/* Adds what a sample costs. */
static MUST_USE enum status try_sample(const struct trial *trial,
				       struct candidate *candidate,
				       unsigned number)
{
	const struct plan_request *request = trial->request;
	struct predict_plan plan = plan_of(request, candidate);
	size_t from = (request->count - trial->sample) / 4 * (2 * number + 1);
	struct predictor *predictor;
	int64_t cost;

	plan.bytes = trial->sample;
	TRY(predictor_new(&plan, &predictor));
	/* Records begin where the strides of the whole do. */
	from -= from % plan.stride;
	predictor_restart(predictor, request->bytes + from);
	cost = predictor_measure_q32(predictor, trial->sample);
	predictor_free(predictor);
	candidate->cost_q32 += cost + cost / 100 * trial->handicap[plan.family];
	return STATUS_OK;
}

static const struct candidate *cheapest(const struct trial *trial)
{
	const struct candidate *best = NULL;

	for (unsigned i = 0; i < trial->candidates; i++) {
		const struct candidate *own = &trial->candidate[i];

		if (!own->out && (!best || own->cost_q32 < best->cost_q32))
			best = own;
	}
	return best;
}

/* Those far behind after one sample are spared the next. */
static MUST_USE enum status try_all(struct trial *trial)
{
	for (unsigned number = 0; number < SAMPLES; number++) {
		int64_t most;

		for (unsigned i = 0; i < trial->candidates; i++) {
			if (!trial->candidate[i].out)
				TRY(try_sample(trial, &trial->candidate[i],
					       number));
		}
		most = cheapest(trial)->cost_q32 / 100 * (100 + CLOSE);
		for (unsigned i = 0; i < trial->candidates; i++)
			trial->candidate[i].out |=
				trial->candidate[i].cost_q32 > most;
	}
	return STATUS_OK;
}

static void enter_binary(struct trial *trial)
{
	const struct plan_request *request = trial->request;
	size_t record = request->record_bytes;
	unsigned lag = lag_find(request->bytes, request->count, STRIDE_MAX);

	enter(trial, FAMILY_BINARY, lag);
	enter(trial, FAMILY_RECORDS, lag);
	if (lag <= COLUMNS_MAX)
		enter(trial, FAMILY_FIELDS, lag);
	if (lag >= 8)
		enter(trial, FAMILY_IMAGE, lag);
	if (record > 1 && record <= STRIDE_MAX && record != lag)
		enter(trial, FAMILY_RECORDS, (unsigned)record);
}

static void enter_text(struct trial *trial, unsigned digits)
{
	trial->handicap[digits > DIGITS_MANY ? FAMILY_PROSE : FAMILY_LINES] =
		TEXT_HANDICAP;
	enter(trial, FAMILY_PROSE, 1);
	enter(trial, FAMILY_LINES, 1);
}

enum status plan_choose(const struct plan_request *request,
			struct predict_plan *plan)
{
	struct trial trial = {.request = request,
			      .handicap[FAMILY_FIELDS] = FIELDS_HANDICAP};
	uint64_t histogram[256] = {0};
	size_t count = request->count, sample = count / SAMPLE_SHARE;
	const struct candidate *best;
	struct candidate flat = {.family = FAMILY_FLAT, .stride = 1};

	for (size_t i = 0; i < count; i++)
		histogram[request->bytes[i]]++;
	sample = sample < SAMPLE_LEAST ? SAMPLE_LEAST : sample;
	sample = sample > SAMPLE_MOST ? SAMPLE_MOST : sample;
	trial.sample = sample < count ? sample : count;
	/* What does not fall below 8 bits a byte is left flat. */
	flat.cost_q32 = (int64_t)(SAMPLES * 8 * trial.sample) << 32;
	if (bases_only(request->bytes, count)) {
		flat.family = FAMILY_BASES;
		best = &flat;
	} else {
		if (text_percent(histogram, count) > 97)
			enter_text(&trial, digits_percent(histogram, count));
		else
			enter_binary(&trial);
		TRY(try_all(&trial));
		best = cheapest(&trial);
		best = best->cost_q32 < flat.cost_q32 ? best : &flat;
	}
	*plan = plan_of(request, best);
	plan->strength = request->strength;
	plan->bytes = count;
	if (request->page_bytes && request->page_bytes < count)
		plan->bytes = request->page_bytes;
	return STATUS_OK;
}
