#include "codec/xz_parts.h"

#include <stdio.h>
#include <string.h>

enum { CRC64, CRC32, SHA256, NONE, RAW };
const char *const xz_containers[] = {
	[CRC64] = "crc64", [CRC32] = "crc32", [SHA256] = "sha256",
	[NONE] = "none",   [RAW] = "raw",     NULL};

bool xz_is_raw(const struct codec_setting *setting)
{
	return setting->container == RAW;
}

lzma_check xz_check(const struct codec_setting *setting)
{
	static const lzma_check checks[] = {[CRC64] = LZMA_CHECK_CRC64,
					    [CRC32] = LZMA_CHECK_CRC32,
					    [SHA256] = LZMA_CHECK_SHA256,
					    [NONE] = LZMA_CHECK_NONE,
					    [RAW] = LZMA_CHECK_NONE};

	return checks[setting->container];
}

enum status xz_parse(const char *text, struct codec_setting *setting,
		     struct reason *why)
{
	char digit[2] = {text[0], '\0'};

	if (!text[0] || (text[1] && strcmp(text + 1, "e") != 0))
		return reason_give(why, STATUS_BAD_USAGE,
				   "level '%s' of xz: 0 to 9, each also with "
				   "e, are levels",
				   text);
	TRY(level_number(digit, 0, 9, "xz (each also with e)", setting, why));
	setting->extreme = text[1] == 'e';
	(void)snprintf(setting->text, sizeof(setting->text), "%s", text);
	return STATUS_OK;
}

/* Branch filters by name; their place + 1 is what a setting keeps. */
static const struct {
	const char *name;
	lzma_vli id;
} branches[] = {{"x86", LZMA_FILTER_X86}, {"arm64", LZMA_FILTER_ARM64}};

#define DELTA "delta:"

enum status xz_option(const char *word, struct codec_setting *setting,
		      struct reason *why)
{
	if (strncmp(word, DELTA, strlen(DELTA)) == 0)
		return option_number(word, DELTA, LZMA_DELTA_DIST_MIN,
				     LZMA_DELTA_DIST_MAX, &setting->delta_bytes,
				     why);
	for (unsigned i = 0; i < sizeof(branches) / sizeof(*branches); i++) {
		if (strcmp(branches[i].name, word) != 0)
			continue;
		if (!lzma_filter_encoder_is_supported(branches[i].id))
			return reason_give(why, STATUS_BAD_USAGE,
					   "option '%s': liblzma %s lacks this "
					   "filter",
					   word, lzma_version_string());
		setting->branch_filter = i + 1;
		/* It looks ahead for whole instructions. */
		setting->never_flushes = true;
		return STATUS_OK;
	}
	return reason_give(why, STATUS_BAD_USAGE, "option '%s': xz has %s",
			   word, codec_xz.options);
}

static bool set_lzma2(const struct codec_setting *setting, size_t page_bytes,
		      lzma_options_lzma *options)
{
	uint32_t preset = (uint32_t)setting->level;

	if (setting->extreme)
		preset |= LZMA_PRESET_EXTREME;
	if (lzma_lzma_preset(options, preset))
		return false;
	if (page_bytes && page_bytes < options->dict_size)
		options->dict_size = page_bytes < LZMA_DICT_SIZE_MIN
					     ? LZMA_DICT_SIZE_MIN
					     : (uint32_t)page_bytes;
	return true;
}

bool xz_filters_set(const struct codec_setting *setting, size_t page_bytes,
		    struct xz_filters *filters)
{
	lzma_filter *next = filters->chain;

	if (!set_lzma2(setting, page_bytes, &filters->lzma2))
		return false;
	filters->delta = (lzma_options_delta){.type = LZMA_DELTA_TYPE_BYTE,
					      .dist = setting->delta_bytes};
	if (setting->branch_filter)
		*next++ = (lzma_filter){branches[setting->branch_filter - 1].id,
					NULL};
	if (setting->delta_bytes)
		*next++ = (lzma_filter){LZMA_FILTER_DELTA, &filters->delta};
	*next++ = (lzma_filter){LZMA_FILTER_LZMA2, &filters->lzma2};
	*next = (lzma_filter){LZMA_VLI_UNKNOWN, NULL};
	return true;
}
