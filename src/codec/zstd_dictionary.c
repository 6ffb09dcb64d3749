#include "codec/zstd_parts.h"

#include <zdict.h>

static MUST_USE enum status learn(struct slice pages, const size_t *sizes,
				  unsigned count, struct buffer *out,
				  struct reason *why)
{
	size_t room = out->room - out->length;
	size_t length = ZDICT_trainFromBuffer(out->bytes + out->length, room,
					      pages.bytes, sizes, count);

	if (ZSTD_isError(length) || ZDICT_isError(length))
		return reason_give(why, STATUS_TOO_SHORT,
				   "libzstd learns no dictionary from %u pages "
				   "(%zu bytes): %s",
				   count, pages.length,
				   ZDICT_getErrorName(length));
	out->length += length;
	return STATUS_OK;
}

static enum status train(const struct codec_setting *setting,
			 struct slice pages, size_t page_bytes,
			 struct buffer *out, struct reason *why)
{
	size_t count = (pages.length + page_bytes - 1) / page_bytes;
	size_t *sizes = NULL;
	enum status status = STATUS_NO_MEMORY;

	if (count > UINT32_MAX)
		return reason_give(why, STATUS_CODEC,
				   "libzstd: more pages than it learns from");
	if (memory_new(count, sizeof(*sizes), &sizes) == STATUS_OK)
		status = buffer_reserve(out, setting->dictionary_bytes);
	if (status != STATUS_OK) {
		memory_free(sizes);
		return reason_give(why, status, "out of memory");
	}
	for (size_t i = 0; i < count; i++)
		sizes[i] = page_bytes;
	if (count && pages.length % page_bytes)
		sizes[count - 1] = pages.length % page_bytes;
	status = learn(pages, sizes, (unsigned)count, out, why);
	memory_free(sizes);
	return status;
}

static void discard(struct codec_dictionary *dictionary)
{
	if (!dictionary)
		return;
	(void)ZSTD_freeCDict(dictionary->encode);
	(void)ZSTD_freeDDict(dictionary->decode);
	memory_free(dictionary);
}

static enum status prepare(const struct codec_setting *setting,
			   struct slice bytes,
			   struct codec_dictionary **dictionary,
			   struct reason *why)
{
	struct codec_dictionary *made;

	if (memory_new_zeroed(1, sizeof(*made), &made) == STATUS_OK) {
		made->encode = ZSTD_createCDict_byReference(
			bytes.bytes, bytes.length, setting->level);
		made->decode =
			ZSTD_createDDict_byReference(bytes.bytes, bytes.length);
		if (made->encode && made->decode) {
			*dictionary = made;
			return STATUS_OK;
		}
		discard(made);
	}
	return reason_give(why, STATUS_NO_MEMORY, "libzstd: out of memory");
}

const struct codec_trainer zstd_trainer = {
	.train = train,
	.prepare = prepare,
	.discard = discard,
};
