#include "codec/page_dictionaries.h"

/* Every second page, from the first on or from the second. */
static MUST_USE enum status collect(struct slice input, size_t page_bytes,
				    size_t first, struct buffer *pages)
{
	for (size_t at = first * page_bytes; at < input.length;
	     at += 2 * page_bytes) {
		size_t left = input.length - at;

		TRY(buffer_add(pages, input.bytes + at,
			       left < page_bytes ? left : page_bytes));
	}
	return STATUS_OK;
}

static MUST_USE enum status train(struct page_dictionaries *made,
				  const struct codec_setting *setting,
				  struct slice input, size_t page_bytes,
				  size_t parity, struct reason *why)
{
	const struct codec_trainer *trainer = made->codec->trainer;
	struct buffer pages;
	enum status status;

	buffer_init(&pages, input.length);
	status = collect(input, page_bytes, 1 - parity, &pages);
	if (status != STATUS_OK)
		status = reason_give(why, status, "out of memory");
	else if (!pages.length)
		status = reason_give(why, STATUS_TOO_SHORT,
				     "one page: none is left to train a "
				     "dictionary on");
	else
		status = trainer->train(
			setting, (struct slice){pages.bytes, pages.length},
			page_bytes, &made->bytes[parity], why);
	buffer_release(&pages);
	if (status != STATUS_OK)
		return status;
	return trainer->prepare(setting,
				(struct slice){made->bytes[parity].bytes,
					       made->bytes[parity].length},
				&made->ready[parity], why);
}

enum status page_dictionaries_init(struct page_dictionaries *dictionaries,
				   const struct codec *codec,
				   const struct codec_setting *setting,
				   struct slice input, size_t page_bytes,
				   struct reason *why)
{
	struct page_dictionaries made = {.codec = NULL};
	enum status status = STATUS_OK;

	*dictionaries = made;
	if (!setting->dictionary_bytes || !page_bytes)
		return STATUS_OK;
	made.codec = codec;
	for (size_t parity = 0; parity < 2; parity++)
		buffer_init(&made.bytes[parity], setting->dictionary_bytes);
	for (size_t parity = 0; status == STATUS_OK && parity < 2; parity++)
		status = train(&made, setting, input, page_bytes, parity, why);
	if (status == STATUS_OK)
		*dictionaries = made;
	else
		page_dictionaries_release(&made);
	return status;
}

void page_dictionaries_release(struct page_dictionaries *dictionaries)
{
	if (!dictionaries->codec)
		return;
	for (size_t parity = 0; parity < 2; parity++) {
		dictionaries->codec->trainer->discard(
			dictionaries->ready[parity]);
		buffer_release(&dictionaries->bytes[parity]);
	}
	*dictionaries = (struct page_dictionaries){.codec = NULL};
}

const struct codec_dictionary *
page_dictionary(const struct page_dictionaries *dictionaries, size_t start,
		size_t page_bytes)
{
	return dictionaries->codec ? dictionaries->ready[start / page_bytes % 2]
				   : NULL;
}
