/*
 * Can any text make the reader of baselines, or the gate behind it, crash,
 * leak, hang or refuse without a reason?
 */
#include "verdict/gate.h"

#include <stdlib.h>
#include <string.h>

int LLVMFuzzerTestOneInput(const uint8_t *bytes, size_t length);

/* What was accepted can be compared with itself, and then nothing is wrong. */
static void judge_itself(const struct baseline *baseline)
{
	struct gate gate;

	if (gate_init(&gate, baseline, baseline, NULL) != STATUS_OK)
		abort();
	for (size_t i = 0; i < gate.count; i++) {
		char command[GATE_COMMAND_BYTES];

		gate_command(&gate.checks[i], "it's.set", command);
		if (!memchr(gate.checks[i].words, '\0', GATE_WORDS_BYTES))
			abort();
	}
	gate_release(&gate);
}

int LLVMFuzzerTestOneInput(const uint8_t *bytes, size_t length)
{
	struct reason why = {""};
	struct baseline baseline;

	if (baseline_parse(&baseline, (const char *)bytes, length, "fuzz.json",
			   &why) != STATUS_OK) {
		if (strncmp(why.text, "fuzz.json:", 10) != 0)
			abort();
		return 0;
	}
	judge_itself(&baseline);
	baseline_release(&baseline);
	return 0;
}
