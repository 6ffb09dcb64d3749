#include "codec/cell_work.h"

#include <string.h>

enum status work_encode(struct cell_work *work, struct slice input,
			const size_t *cuts, size_t cut_count,
			uint64_t *piece_bytes, struct reason *why)
{
	const struct codec_job job = {
		.setting = work->setting,
		.input = input,
		.page_bytes = work->page_bytes,
		.dictionary = work->dictionary,
		.cuts = cuts,
		.cut_count = cut_count,
		.piece_bytes = piece_bytes,
		.memory = cuts ? NULL : &work->encode,
		.session = work->session,
		.again = work->again,
	};

	work->packed.length = 0;
	return work->codec->encode(&job, &work->packed, why);
}

enum status work_encode_again(struct cell_work *work, struct slice input,
			      struct reason *why)
{
	struct buffer first = work->packed;
	enum status status;

	if (!work->setting->threads && !work->codec->house)
		return STATUS_OK;
	buffer_init(&work->packed, SIZE_MAX / 2);
	work->again = true;
	status = work_encode(work, input, NULL, 0, NULL, why);
	work->again = false;
	if (status == STATUS_OK &&
	    (work->packed.length != first.length ||
	     memcmp(work->packed.bytes, first.bytes, first.length) != 0))
		status = reason_give(why, STATUS_CODEC,
				     "not reproducible: %zu bytes, then other "
				     "bytes (%zu) for the same input",
				     first.length, work->packed.length);
	buffer_release(&work->packed);
	work->packed = first;
	return status;
}

static void note_difference(struct cell_work *work, struct slice input,
			    const char *run, struct reason *why)
{
	size_t i = 0;

	while (i < input.length && i < work->plain.length &&
	       input.bytes[i] == work->plain.bytes[i])
		i++;
	work->facts->lossless = 0;
	(void)reason_give(why, STATUS_MISMATCH,
			  "not lossless: the %s decodes to %zu of %zu bytes "
			  "and first differs at byte %zu of its input",
			  run, work->plain.length, input.length, i);
}

enum status work_check(struct cell_work *work, struct slice input,
		       const char *run, struct reason *why)
{
	const struct codec_job job = {
		.setting = work->setting,
		.input = {work->packed.bytes, work->packed.length},
		.page_bytes = work->page_bytes,
		.dictionary = work->dictionary,
		.memory = &work->decode,
		.session = work->session,
	};

	work->plain.length = 0;
	work->plain.limit = input.length + 1;
	TRY(work->codec->decode(&job, &work->plain, why));
	if (work->plain.length != input.length ||
	    (input.length &&
	     memcmp(work->plain.bytes, input.bytes, input.length) != 0))
		note_difference(work, input, run, why);
	return STATUS_OK;
}
