#include "codec/cell_work.h"

#include <stdio.h>
#include <string.h>

static MUST_USE enum status out_of_memory(struct reason *why)
{
	return reason_give(why, STATUS_NO_MEMORY, "out of memory");
}

static bool flushes(const struct cell_work *work)
{
	return work->codec->flushes && !work->setting->never_flushes;
}

static void count_stored(struct cell_work *work, uint64_t bytes)
{
	uint64_t unit = work->setting->storage_unit;

	if (unit)
		work->facts->stored_bytes += (bytes + unit - 1) / unit * unit;
}

static MUST_USE enum status count_stream(struct cell_work *work,
					 struct reason *why)
{
	const struct slice stream = {work->packed.bytes, work->packed.length};
	uint64_t framing = 0;
	enum status status;

	work->facts->bytes += stream.length;
	count_stored(work, stream.length);
	if (!work->codec->framing) {
		work->facts->framing_known = 0;
		return STATUS_OK;
	}
	status = work->codec->framing(work->setting, stream, &framing);
	if (status == STATUS_NO_MEMORY)
		return out_of_memory(why);
	if (status != STATUS_OK)
		return reason_give(why, STATUS_CODEC,
				   "%s: its own stream cannot be read",
				   work->codec->name);
	work->facts->framing_bytes += framing;
	return STATUS_OK;
}

/* Bits by block from pieces that end at the cuts from block first on. */
static void add_pieces(struct cell_work *work, size_t first,
		       const uint64_t *piece_bytes, size_t count)
{
	for (size_t i = 0; i < count; i++) {
		int64_t bits_q16 = (int64_t)piece_bytes[i] * 8 * BIT_Q16;

		work->facts->flushed.block_q16[first + i] += bits_q16;
		work->facts->flushed.headline_q16 += bits_q16;
		work->facts->flushed_bytes += piece_bytes[i];
	}
}

static MUST_USE enum status flush_at(struct cell_work *work, struct slice input,
				     const size_t *cuts, size_t count,
				     struct reason *why)
{
	uint64_t *piece_bytes;
	enum status status;

	if (memory_new(count, sizeof(*piece_bytes), &piece_bytes) != STATUS_OK)
		return out_of_memory(why);
	status = work_encode(work, input, cuts, count, piece_bytes, why);
	if (status == STATUS_OK)
		status = work_check(work, input, "flushed stream", why);
	if (status == STATUS_OK)
		add_pieces(work, work->block, piece_bytes, count);
	memory_free(piece_bytes);
	return status;
}

static MUST_USE enum status measure_whole(struct cell_work *work,
					  struct reason *why)
{
	const struct slice input = {work->sequence->canonical,
				    work->sequence->canonical_bytes};

	work->facts->pages = 1;
	TRY(work_encode(work, input, NULL, 0, NULL, why));
	TRY(work_encode_again(work, input, why));
	TRY(count_stream(work, why));
	TRY(work_check(work, input, "stream", why));
	if (!work->facts->lossless || !work->facts->flushed.blocks)
		return STATUS_OK;
	return flush_at(work, input, work->cuts->byte + 1, work->cuts->blocks,
			why);
}

/*
 * Spreads a page's bits over the blocks by the bytes that lie in each, whole
 * units by rounding the running total down, so that nothing is lost.
 */
static void spread_page(struct cell_work *work, size_t start, size_t end,
			uint64_t packed_bytes)
{
	struct costs *flushed = &work->facts->flushed;
	const wide_uint all = (wide_uint)packed_bytes * 8 * BIT_Q16;
	int64_t given = 0;

	for (;;) {
		size_t cut = work->cuts->byte[work->block + 1];
		size_t reach = cut < end ? cut : end;
		int64_t now = (int64_t)(all * (reach - start) / (end - start));

		flushed->block_q16[work->block] += now - given;
		given = now;
		if (cut > end || reach == work->sequence->canonical_bytes)
			break;
		work->block++;
		if (reach == end)
			break;
	}
	flushed->headline_q16 += given;
	work->facts->flushed_bytes += packed_bytes;
}

/* A large page: flushed inside at the block cuts that fall into it. */
static MUST_USE enum status flush_page(struct cell_work *work,
				       struct slice page, size_t start,
				       struct reason *why)
{
	const size_t *byte = work->cuts->byte + 1;
	size_t end = start + page.length, count = 1;
	size_t *cuts;
	enum status status;

	while (byte[work->block + count - 1] < end)
		count++;
	if (memory_new(count, sizeof(*cuts), &cuts) != STATUS_OK)
		return out_of_memory(why);
	for (size_t i = 0; i < count; i++)
		cuts[i] = byte[work->block + i] - start;
	cuts[count - 1] = page.length;
	status = flush_at(work, page, cuts, count, why);
	memory_free(cuts);
	work->block += byte[work->block + count - 1] == end ? count : count - 1;
	return status;
}

static MUST_USE enum status measure_page(struct cell_work *work, size_t start,
					 bool small, struct reason *why)
{
	size_t left = work->sequence->canonical_bytes - start;
	const struct slice page = {work->sequence->canonical + start,
				   left < work->page_bytes ? left
							   : work->page_bytes};
	size_t before = work->facts->bytes;

	work->facts->pages++;
	work->dictionary =
		page_dictionary(&work->dictionaries, start, work->page_bytes);
	TRY(work_encode(work, page, NULL, 0, NULL, why));
	TRY(work_encode_again(work, page, why));
	TRY(count_stream(work, why));
	TRY(work_check(work, page, "page", why));
	if (!work->facts->lossless || !work->facts->flushed.blocks)
		return STATUS_OK;
	if (!small)
		return flush_page(work, page, start, why);
	spread_page(work, start, start + page.length,
		    work->facts->bytes - before);
	return STATUS_OK;
}

/*
 * Every byte of the corpus bears the same share of the dictionaries: a reader
 * needs them whatever page is asked for.
 */
static void spread_dictionaries(struct cell_work *work)
{
	struct costs *flushed = &work->facts->flushed;
	const wide_uint all =
		(wide_uint)work->facts->dictionary_bytes * 8 * BIT_Q16;
	size_t bytes = work->sequence->canonical_bytes;
	int64_t given = 0;

	for (size_t i = 0; i < flushed->blocks; i++) {
		int64_t now = (int64_t)(all * work->cuts->byte[i + 1] / bytes);

		flushed->block_q16[i] += now - given;
		given = now;
	}
	flushed->headline_q16 += given;
	if (flushed->blocks)
		work->facts->flushed_bytes += work->facts->dictionary_bytes;
}

static void count_dictionaries(struct cell_work *work)
{
	if (!work->dictionaries.codec)
		return;
	for (size_t parity = 0; parity < 2; parity++) {
		uint64_t bytes = work->dictionaries.bytes[parity].length;

		work->facts->dictionary_bytes += bytes;
		count_stored(work, bytes);
	}
	work->facts->bytes += work->facts->dictionary_bytes;
	spread_dictionaries(work);
}

static MUST_USE enum status measure_pages(struct cell_work *work,
					  struct reason *why)
{
	size_t bytes = work->sequence->canonical_bytes;
	size_t blocks = work->cuts->blocks;
	bool small = !blocks || work->page_bytes <= bytes / blocks / 4;

	if (!small && !flushes(work))
		costs_release(&work->facts->flushed);
	for (size_t start = 0; start < bytes; start += work->page_bytes) {
		enum status status = measure_page(work, start, small, why);

		if (status != STATUS_OK) {
			reason_prefix(why, "page at byte %zu: ", start);
			return status;
		}
		if (!work->facts->lossless) {
			reason_prefix(why, "page at byte %zu: ", start);
			return STATUS_OK;
		}
	}
	return STATUS_OK;
}

/* What threads and other processes take is not the same twice. */
static void note_memory(struct cell_work *work)
{
	bool elsewhere = work->codec->house != NULL;

	work->facts->encode_memory_bytes = work->setting->threads || elsewhere
						   ? CELL_MEMORY_UNKNOWN
						   : work->encode.peak_bytes;
	work->facts->decode_memory_bytes =
		elsewhere ? CELL_MEMORY_UNKNOWN : work->decode.peak_bytes;
}

static MUST_USE enum status measure(struct cell_work *work, struct reason *why)
{
	const struct slice input = {work->sequence->canonical,
				    work->sequence->canonical_bytes};
	bool spread = flushes(work) || work->page_bytes;

	work->facts->storage_unit = work->setting->storage_unit;
	work->facts->lossless = 1;
	work->facts->framing_known = 1;
	if (costs_init(&work->facts->flushed,
		       spread ? work->cuts->blocks : 0) != STATUS_OK)
		return out_of_memory(why);
	if (!work->page_bytes) {
		TRY(measure_whole(work, why));
	} else {
		TRY(page_dictionaries_init(&work->dictionaries, work->codec,
					   work->setting, input,
					   work->page_bytes, why));
		TRY(measure_pages(work, why));
		count_dictionaries(work);
	}
	if (!work->facts->lossless)
		costs_release(&work->facts->flushed);
	note_memory(work);
	return STATUS_OK;
}

static MUST_USE enum status measure_in_session(struct cell_work *work,
					       struct reason *why)
{
	size_t bytes = work->sequence->canonical_bytes;
	size_t page = work->page_bytes ? work->page_bytes : bytes;
	enum status status;

	TRY(house_open(work->codec->house, work->setting,
		       page ? (bytes + page - 1) / page : 1, &work->session,
		       why));
	status = measure(work, why);
	if (status == STATUS_OK && work->facts->lossless)
		status = house_end(work->session, why);
	house_close(work->session);
	return status;
}

enum status cell_measure(const struct codec *codec,
			 const struct codec_setting *setting, size_t page_bytes,
			 const struct sequence *sequence,
			 const struct cuts *cuts, struct cell_facts *facts,
			 struct reason *why)
{
	struct cell_facts made = {0};
	struct cell_work work = {.codec = codec,
				 .setting = setting,
				 .page_bytes = page_bytes,
				 .sequence = sequence,
				 .cuts = cuts,
				 .facts = &made};
	enum status status;

	buffer_init(&work.packed, SIZE_MAX / 2);
	buffer_init(&work.plain, SIZE_MAX / 2);
	status = measure_in_session(&work, why);
	buffer_release(&work.packed);
	buffer_release(&work.plain);
	page_dictionaries_release(&work.dictionaries);
	if (status == STATUS_OK)
		*facts = made;
	else
		cell_facts_release(&made);
	return status;
}
