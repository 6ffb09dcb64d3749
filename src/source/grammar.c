#include "source/grammar.h"

#include <assert.h>
#include <string.h>

enum { ZIPF_SCALE = 5040, ZIPF_SHIFT = 2, DEPTH_MAX = 16 };

static uint32_t phrase_find(const struct grammar *grammar, const char *name,
			    size_t length, uint32_t below)
{
	uint32_t i = 0;

	while (i < below && (strncmp(grammar->phrases[i].name, name, length) ||
			     grammar->phrases[i].name[length]))
		i++;
	assert(i < below);
	return i;
}

static void choices_find(struct grammar_phrase *out,
			 const struct phrase *phrase)
{
	uint32_t count = 1;

	out->starts[0] = 0;
	for (const char *c = phrase->choices; *c; c++) {
		if (*c == '|')
			out->starts[count++] =
				(uint16_t)(c + 1 - phrase->choices);
		assert(count < WEIGHTS_MAX);
	}
	weights_init_zipf(&out->weights, count, ZIPF_SCALE, ZIPF_SHIFT);
	if (phrase->even) {
		uint32_t ones[WEIGHTS_MAX];

		for (uint32_t i = 0; i < count; i++)
			ones[i] = 1;
		weights_init(&out->weights, ones, count);
	}
}

/* The text up to the next reference, and past it; NULL name: no reference. */
static const char *piece(const char *text, size_t *literal, const char **name,
			 size_t *name_length)
{
	const char *close;

	*literal = strcspn(text, "|<");
	*name = NULL;
	if (text[*literal] != '<')
		return text + *literal;
	*name = text + *literal + 1;
	close = strchr(*name, '>');
	assert(close);
	*name_length = (size_t)(close - *name);
	return close + 1;
}

static void measure(struct grammar *grammar, uint32_t index)
{
	struct grammar_phrase *out = &grammar->compiled[index];

	out->bits = weights_entropy(&out->weights);
	out->bytes = 0;
	for (uint32_t i = 0; i < out->weights.count; i++) {
		const char *text =
			grammar->phrases[index].choices + out->starts[i];
		double p = weights_probability(&out->weights, i);
		const char *name;
		size_t literal, length;

		do {
			text = piece(text, &literal, &name, &length);
			out->bytes += p * (double)literal;
			if (name) {
				const struct grammar_phrase *inner =
					&grammar->compiled[phrase_find(
						grammar, name, length, index)];

				out->bits += p * inner->bits;
				out->bytes += p * inner->bytes;
			}
		} while (name);
	}
}

void grammar_init(struct grammar *grammar, const struct phrase *phrases,
		  uint32_t count)
{
	assert(count >= 1 && count <= GRAMMAR_PHRASES_MAX);
	grammar->phrases = phrases;
	grammar->count = count;
	for (uint32_t i = 0; i < count; i++) {
		choices_find(&grammar->compiled[i], &phrases[i]);
		measure(grammar, i);
	}
}

static const char *draw(const struct grammar *grammar, uint32_t index,
			struct random_stream *random)
{
	const struct grammar_phrase *phrase = &grammar->compiled[index];

	return grammar->phrases[index].choices +
	       phrase->starts[weights_draw(&phrase->weights, random)];
}

void grammar_write(const struct grammar *grammar, struct source_stream *stream,
		   struct random_stream *random)
{
	const char *open[DEPTH_MAX]; /* texts still to be finished */
	unsigned depth = 1;

	open[0] = draw(grammar, grammar->count - 1, random);
	while (depth) {
		const char *text = open[depth - 1];
		const char *name;
		size_t literal, length;

		open[depth - 1] = piece(text, &literal, &name, &length);
		stream_put(stream, text, literal);
		if (name) {
			assert(depth < DEPTH_MAX);
			open[depth++] = draw(grammar,
					     phrase_find(grammar, name, length,
							 grammar->count),
					     random);
		} else {
			depth--;
		}
	}
}
