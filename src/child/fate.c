#include "child/pump.h"

#include <signal.h>
#include <stdio.h>
#include <string.h>

/* Failing with that share of its memory in use is running out of it. */
#define NEARLY_ALL(bytes) ((bytes) / 4 * 3)

static const char *signal_words(int number)
{
	static const struct {
		int number;
		const char *words;
	} known[] = {
		{SIGSEGV, "a bad address"},  {SIGABRT, "abort"},
		{SIGBUS, "bus error"},       {SIGFPE, "bad arithmetic"},
		{SIGILL, "bad instruction"}, {SIGKILL, "killed"},
		{SIGPIPE, "broken pipe"},    {SIGTERM, "terminated"},
	};

	for (size_t i = 0; i < sizeof(known) / sizeof(*known); i++) {
		if (known[i].number == number)
			return known[i].words;
	}
	return "see signal(7)";
}

static MUST_USE enum status by_signal(const struct child *child,
				      struct reason *why)
{
	int number = child->report.value;

	if (number == SIGXCPU)
		return reason_give(
			why, STATUS_CODEC,
			"timed out: all of its CPU seconds are used");
	if (number == SIGXFSZ)
		return reason_give(
			why, STATUS_CODEC,
			"wrote too much: a file of more than %llu "
			"bytes",
			(unsigned long long)child->plan->bounds.file_bytes);
	return reason_give(why, STATUS_CODEC, "crashed: signal %d (%s)", number,
			   signal_words(number));
}

static MUST_USE enum status by_report(const struct child *child,
				      struct reason *why)
{
	const struct host_report *report = &child->report;
	uint64_t memory = child->plan->bounds.memory_bytes;
	bool good = report->end == HOST_EXITED && report->value == 0;

	if (report->end == HOST_NO_PROGRAM)
		return reason_give(why, STATUS_CODEC, "missing program: %s: %s",
				   child->plan->words[0],
				   strerror(report->value));
	if (report->end == HOST_NO_FOLDER || report->end == HOST_LIMITLESS)
		return reason_give(why, STATUS_IO, "cannot be run: %s: %s",
				   report->end == HOST_NO_FOLDER
					   ? "its private folder"
					   : "its limits",
				   strerror(report->value));
	if (!good && report->peak_bytes >= NEARLY_ALL(memory))
		return reason_give(why, STATUS_CODEC,
				   "out of memory: took %llu of its %llu bytes",
				   (unsigned long long)report->peak_bytes,
				   (unsigned long long)memory);
	if (report->end == HOST_SIGNALLED)
		return by_signal(child, why);
	if (report->end == HOST_STOPPED)
		return reason_give(why, STATUS_CODEC, "was ended");
	if (report->value != 0)
		return reason_give(why, STATUS_CODEC, "failed: exit code %d",
				   report->value);
	if (report->left_running)
		return reason_give(why, STATUS_CODEC,
				   "left a process running, which was ended");
	return STATUS_OK;
}

enum status child_fate(const struct child *child, struct reason *why)
{
	if (child->status != STATUS_OK)
		return reason_give(why, child->status, "out of memory");
	if (child->too_much)
		return reason_give(why, STATUS_CODEC,
				   "wrote too much: more than its output may "
				   "be long");
	if (child->timed_out)
		return reason_give(why, STATUS_CODEC,
				   "timed out: not done after %u s",
				   child->plan->bounds.seconds);
	if (child->report_length != sizeof(child->report))
		return reason_give(why, STATUS_IO,
				   "cannot be run: %s ended without a report",
				   child->plan->host);
	return by_report(child, why);
}

void child_quote(const struct child *child, struct reason *why)
{
	char clean[TAIL_BYTES + 1];
	size_t used = strlen(why->text), length = 0;

	for (size_t i = 0; i < child->tail_length; i++) {
		char c = child->tail[i];
		bool plain = c > ' ' && c < 127;

		if (plain || (length && clean[length - 1] != ' '))
			clean[length++] = (char)(plain ? c : ' ');
	}
	while (length && clean[length - 1] == ' ')
		length--;
	clean[length] = '\0';
	if (length)
		(void)snprintf(why->text + used, sizeof(why->text) - used,
			       "; it said: %s", clean);
}
