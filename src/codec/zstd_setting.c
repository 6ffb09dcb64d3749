#include "codec/zstd_parts.h"

#include <stdio.h>
#include <string.h>

/* "19l": long-distance matching over a window of 2^27 bytes. */
#define LONG_WINDOW_LOG 27
/* More workers than a machine has gain nothing; the library takes 200. */
#define THREADS_MAX 64

const char *const zstd_containers[] = {
	[ZSTD_SIZED] = "sized",     [ZSTD_CHECKSUM] = "checksum",
	[ZSTD_UNSIZED] = "unsized", [ZSTD_MAGICLESS] = "magicless",
	[ZSTD_BARE] = "bare",       NULL};

bool zstd_has_magic(const struct codec_setting *setting)
{
	return setting->container < ZSTD_MAGICLESS;
}

bool zstd_has_size(const struct codec_setting *setting)
{
	return setting->container != ZSTD_UNSIZED &&
	       setting->container != ZSTD_BARE;
}

enum status zstd_parse(const char *text, struct codec_setting *setting,
		       struct reason *why)
{
	char number[CELL_NAME_BYTES];
	size_t length = strlen(text);
	bool far = length > 1 && text[length - 1] == 'l';

	if (length >= sizeof(number))
		return reason_give(why, STATUS_BAD_USAGE,
				   "level '%s' of zstd: too long", text);
	(void)snprintf(number, sizeof(number), "%.*s",
		       (int)(far ? length - 1 : length), text);
	if (strcmp(number, "0") == 0)
		return reason_give(why, STATUS_BAD_USAGE,
				   "level '0' of zstd: 0 stands for the "
				   "library's default; write that level, 3");
	TRY(level_number(number, ZSTD_minCLevel(), ZSTD_maxCLevel(),
			 "zstd (each also with l)", setting, why));
	setting->long_distance = far;
	setting->window_log = far ? LONG_WINDOW_LOG : 0;
	(void)snprintf(setting->text, sizeof(setting->text), "%s", text);
	return STATUS_OK;
}

#define WINDOW "window:"
#define THREADS "threads:"

enum status zstd_option(const char *word, struct codec_setting *setting,
			struct reason *why)
{
	if (strncmp(word, WINDOW, strlen(WINDOW)) == 0) {
		ZSTD_bounds bounds = ZSTD_cParam_getBounds(ZSTD_c_windowLog);

		return option_number(word, WINDOW, bounds.lowerBound,
				     bounds.upperBound, &setting->window_log,
				     why);
	}
	if (strncmp(word, THREADS, strlen(THREADS)) != 0)
		return reason_give(why, STATUS_BAD_USAGE,
				   "option '%s': zstd has %s", word,
				   codec_zstd.options);
	if (ZSTD_cParam_getBounds(ZSTD_c_nbWorkers).upperBound == 0)
		return reason_give(why, STATUS_BAD_USAGE,
				   "option '%s': this libzstd was built "
				   "without threads",
				   word);
	return option_number(word, THREADS, 1, THREADS_MAX, &setting->threads,
			     why);
}
