/*
 * Can any text make the reader of set files crash, leak, hang or refuse without
 * a reason? Built with -fsanitize=fuzzer,address,undefined, or with
 * replay_main.c to run the seeds and what was found as a plain test.
 */
#include "corpus/set_file.h"

#include <stdlib.h>
#include <string.h>

int LLVMFuzzerTestOneInput(const uint8_t *bytes, size_t length);

/* What holds of every set that was accepted. */
static int is_whole(const struct set *set)
{
	int whole = *set->name && set->corpus_count > 0 &&
		    set->tolerance >= 0 && set->speed_tolerance >= 0;

	for (size_t i = 0; i < set->corpus_count; i++) {
		const struct set_corpus *corpus = &set->corpora[i];

		whole = whole && *corpus->name && *corpus->file &&
			corpus->line > 0 &&
			(unsigned)corpus->rules.kind < SYMBOL_KIND_COUNT;
	}
	for (size_t i = 0; i < set->codec_count; i++) {
		const struct set_codec *codec = &set->codecs[i];

		whole = whole && *codec->name && codec->layouts.count > 0;
	}
	return whole;
}

int LLVMFuzzerTestOneInput(const uint8_t *bytes, size_t length)
{
	struct slice text = {bytes, length};
	struct reason why = {""};
	struct set set = {0};
	enum status status;

	if (!length)
		return 0;
	status = set_parse(text, "fuzz.set", bytes[0] & 1, &set, &why);
	if (status == STATUS_OK ? !is_whole(&set)
				: strncmp(why.text, "fuzz.set:", 9) != 0)
		abort();
	set_release(&set);
	return 0;
}
