#include "verdict/gate_parts.h"

#include <stdarg.h>
#include <stdio.h>
#include <string.h>

#include "cost/findings.h"

/* Differences, one after another, as far as there is room. */
struct differences {
	char text[REASON_BYTES - 200];
	size_t used;
};

static void differ(struct differences *list, const char *format, ...)
	__attribute__((format(printf, 2, 3)));

static void differ(struct differences *list, const char *format, ...)
{
	size_t room = sizeof(list->text) - list->used;
	va_list arguments;
	int length;

	if (room < 4)
		return;
	if (list->used) {
		memcpy(list->text + list->used, "; ", 3);
		list->used += 2;
		room -= 2;
	}
	va_start(arguments, format);
	length = vsnprintf(list->text + list->used, room, format, arguments);
	va_end(arguments);
	if (length > 0)
		list->used += (size_t)length < room ? (size_t)length : room - 1;
}

static void compare_text(struct differences *list, const char *what,
			 const char *pinned, const char *now)
{
	if (strcmp(pinned, now) != 0)
		differ(list, "%s: '%s' at the pin, '%s' now", what, pinned,
		       now);
}

static void compare_corpus(struct differences *list,
			   const struct baseline_corpus *pinned,
			   const struct baseline_corpus *now)
{
	char what[LEDGER_NAME_BYTES + 16];

	(void)snprintf(what, sizeof(what), "symbols of %s", pinned->name);
	compare_text(list, what, symbol_kind_name(pinned->kind),
		     symbol_kind_name(now->kind));
	(void)snprintf(what, sizeof(what), "feed of %s", pinned->name);
	compare_text(list, what, pinned->rolling ? "rolling" : "fixed",
		     now->rolling ? "rolling" : "fixed");
}

enum status gate_refuse(const struct baseline *pin,
			const struct baseline *tonight, struct reason *why)
{
	struct differences list = {.used = 0};

	compare_text(&list, "set", pin->set_name, tonight->set_name);
	compare_text(&list, "yardstick", pin->yardstick, tonight->yardstick);
	compare_text(&list, "version of the reference " REFERENCE_NAME,
		     baseline_version(pin, REFERENCE_NAME),
		     baseline_version(tonight, REFERENCE_NAME));
	if (pin->orders != tonight->orders)
		differ(&list, "--orders: %u at the pin, %u now", pin->orders,
		       tonight->orders);
	if (pin->seed != tonight->seed)
		differ(&list, "--seed: %llu at the pin, %llu now",
		       (unsigned long long)pin->seed,
		       (unsigned long long)tonight->seed);
	for (size_t i = 0; i < pin->corpus_count; i++) {
		const struct baseline_corpus *now =
			baseline_corpus_find(tonight, pin->corpora[i].name);

		if (now)
			compare_corpus(&list, &pin->corpora[i], now);
	}
	if (!list.used)
		return STATUS_OK;
	return reason_give(why, STATUS_MISMATCH,
			   "the baseline and survey %lld cannot be compared: "
			   "%s: survey again as at the pin, or pin anew",
			   (long long)tonight->survey, list.text);
}
