#include "support/symbols_of.h"

#include "support/near.h"

#include <string.h>

struct sequence sequence_of(struct slice bytes, enum symbol_kind kind)
{
	struct symbol_rules rules = {.kind = kind};
	struct reason why = {""};
	struct sequence sequence = {0};
	enum status status = sequence_init(&sequence, bytes, &rules, &why);

	if (status != STATUS_OK)
		fail_msg("%s: %s", status_words(status), why.text);
	assert_string_equal(why.text, "");
	return sequence;
}

uint32_t code_of(const struct sequence *sequence, size_t i)
{
	uint32_t code = 0;

	for (unsigned j = 0; j < sequence->code_width; j++)
		code = code * 256 +
		       sequence->codes[i * sequence->code_width + j];
	return code;
}

void assert_codes(const struct sequence *sequence, const uint32_t *codes,
		  size_t count)
{
	assert_int_equal(sequence->n, count);
	for (size_t i = 0; i < count; i++)
		assert_int_equal(code_of(sequence, i), codes[i]);
}

void assert_refused(struct slice bytes, struct symbol_rules rules,
		    enum status wanted, const char *words)
{
	struct sequence sequence = {.n = 77};
	struct reason why = {""};

	assert_int_equal(sequence_init(&sequence, bytes, &rules, &why), wanted);
	if (!strstr(why.text, words))
		fail_msg("\"%s\" does not say \"%s\"", why.text, words);
	assert_int_equal(sequence.n, 77);
	assert_int_equal(sequence_init(&sequence, bytes, &rules, NULL), wanted);
}
