#include "cli/meter.h"

#include <stdio.h>
#include <unistd.h>

#define SECONDS_BETWEEN_LINES 0.1
#define WIPE "\r\033[K"

void meter_init(struct meter *meter, bool wanted)
{
	*meter = (struct meter){.on = wanted && isatty(STDERR_FILENO),
				.shown = -1};
}

static void time_left(char text[32], double seconds)
{
	unsigned whole = seconds > 0 ? (unsigned)(seconds + 0.5) : 0;

	if (seconds < 0)
		(void)snprintf(text, 32, "time left unknown");
	else
		(void)snprintf(text, 32, "about %u:%02u left", whole / 60,
			       whole % 60);
}

void meter_watch(void *context, const struct run_progress *progress)
{
	struct meter *meter = context;
	char left[32];

	if (!meter->on ||
	    (meter->shown >= 0 &&
	     progress->seconds - meter->shown < SECONDS_BETWEEN_LINES))
		return;
	meter->shown = progress->seconds;
	time_left(left, progress->seconds_left);
	(void)fprintf(stderr, WIPE "%3.0f%%  %zu of %zu  %s  %.32s: %.32s",
		      100 * progress->share, progress->done, progress->total,
		      left, progress->corpus, progress->what);
	(void)fflush(stderr);
}

void meter_clear(const struct meter *meter)
{
	if (meter->on && meter->shown >= 0)
		(void)fprintf(stderr, WIPE);
}
