#include "codec/codec.h"

#include "codec/page_dictionaries.h"

/* One encode and decode of one page or of the whole. */
struct timed_piece {
	const struct codec *codec;
	const struct codec_setting *setting;
	const struct cell_clock *clock;
	size_t page_bytes;
	struct page_dictionaries dictionaries;
	struct buffer packed, plain;
};

static MUST_USE enum status time_piece(struct timed_piece *piece,
				       struct slice input, size_t start,
				       struct cell_round *round,
				       struct reason *why)
{
	struct codec_job job = {
		.setting = piece->setting,
		.input = input,
		.page_bytes = piece->page_bytes,
		.dictionary = page_dictionary(&piece->dictionaries, start,
					      piece->page_bytes)};
	double cpu = piece->clock->cpu_seconds();
	double wall = piece->clock->wall_seconds();

	piece->packed.length = 0;
	TRY(piece->codec->encode(&job, &piece->packed, why));
	round->encode_cpu += piece->clock->cpu_seconds() - cpu;
	round->encode_wall += piece->clock->wall_seconds() - wall;
	piece->plain.length = 0;
	piece->plain.limit = input.length + 1;
	job.input = (struct slice){piece->packed.bytes, piece->packed.length};
	cpu = piece->clock->cpu_seconds();
	wall = piece->clock->wall_seconds();
	TRY(piece->codec->decode(&job, &piece->plain, why));
	round->decode_cpu += piece->clock->cpu_seconds() - cpu;
	round->decode_wall += piece->clock->wall_seconds() - wall;
	return STATUS_OK;
}

enum status cell_time(const struct codec *codec,
		      const struct codec_setting *setting, size_t page_bytes,
		      struct slice input, const struct cell_clock *clock,
		      struct cell_round *round, struct reason *why)
{
	struct timed_piece piece = {.codec = codec,
				    .setting = setting,
				    .clock = clock,
				    .page_bytes = page_bytes};
	struct cell_round sum = {0, 0, 0, 0};
	size_t step = page_bytes ? page_bytes : input.length, start = 0;
	enum status status;

	/* Trained and made ready once, as whoever ships them does. */
	TRY(page_dictionaries_init(&piece.dictionaries, codec, setting, input,
				   page_bytes, why));
	status = STATUS_OK;
	buffer_init(&piece.packed, SIZE_MAX / 2);
	buffer_init(&piece.plain, SIZE_MAX / 2);
	/* The pages of the heap are touched before the clock starts. */
	if (buffer_reserve(&piece.packed, step + step / 8 + 1024) !=
		    STATUS_OK ||
	    buffer_reserve(&piece.plain, step + 1) != STATUS_OK)
		status = reason_give(why, STATUS_NO_MEMORY, "out of memory");
	while (status == STATUS_OK && start < input.length) {
		size_t length = input.length - start;
		struct slice page = {input.bytes + start, 0};

		page.length = length < step ? length : step;
		status = time_piece(&piece, page, start, &sum, why);
		start += page.length;
	}
	buffer_release(&piece.packed);
	buffer_release(&piece.plain);
	page_dictionaries_release(&piece.dictionaries);
	if (status == STATUS_OK)
		*round = sum;
	return status;
}
