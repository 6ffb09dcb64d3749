/* Do programs that are not ours decode our streams, whole and flushed? */
#include "codec/codec.h"

#include "support/bytes.h"
#include "support/near.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#define LENGTH 100000

/* A decoder reads standard input and writes standard output. */
struct decoder {
	const char *codec;
	const char *levels[3];
	const char *present; /* succeeds where the decoder is installed */
	const char *command;
};

static const struct decoder decoders[] = {
	{"zlib",
	 {"1", "6", "9"},
	 "python3 -c 'import zlib' 2>/dev/null",
	 "python3 -c 'import sys, zlib; sys.stdout.buffer.write("
	 "zlib.decompress(sys.stdin.buffer.read()))'"},
	{"xz",
	 {"0", "6", "9e"},
	 "xz --version >/dev/null 2>&1",
	 "xz --decompress --stdout --format=xz"},
	{"zstd",
	 {"-5", "19", "19l"},
	 "zstd --version >/dev/null 2>&1",
	 "zstd --decompress --stdout --quiet"},
};

static uint8_t bytes[LENGTH];

static void write_file(const char *path, const struct buffer *packed)
{
	FILE *file = fopen(path, "wb");

	assert_non_null(file);
	assert_int_equal(fwrite(packed->bytes, 1, packed->length, file),
			 packed->length);
	assert_int_equal(fclose(file), 0);
}

/* Fails unless the other program turns packed into the bytes above. */
static void decode_outside(const char *command, const struct buffer *packed)
{
	static uint8_t plain[LENGTH + 1];
	char path[] = "/tmp/codec-tools-XXXXXX", line[512];
	int handle = mkstemp(path);
	FILE *pipe;
	size_t length;

	assert_true(handle >= 0);
	assert_int_equal(close(handle), 0);
	write_file(path, packed);
	(void)snprintf(line, sizeof(line), "%s < %s", command, path);
	pipe = popen(line, "r");
	assert_non_null(pipe);
	length = fread(plain, 1, sizeof(plain), pipe);
	assert_int_equal(pclose(pipe), 0);
	assert_int_equal(remove(path), 0);
	assert_int_equal(length, LENGTH);
	assert_memory_equal(plain, bytes, LENGTH);
}

static void check_level(const struct decoder *decoder, const char *level)
{
	const struct codec *codec = codec_find(decoder->codec);
	const size_t cuts[] = {1, 1000, 65536, LENGTH};
	struct codec_setting setting = {.text = ""};
	struct codec_job job = {.setting = &setting, .input = {bytes, LENGTH}};
	struct buffer packed;
	struct reason why;

	assert_int_equal(codec->parse(level, &setting, &why), STATUS_OK);
	buffer_init(&packed, 1 << 20);
	assert_int_equal(codec->encode(&job, &packed, &why), STATUS_OK);
	decode_outside(decoder->command, &packed);
	packed.length = 0;
	job.cuts = cuts;
	job.cut_count = 4;
	assert_int_equal(codec->encode(&job, &packed, &why), STATUS_OK);
	decode_outside(decoder->command, &packed);
	buffer_release(&packed);
}

static void other_programs_decode_our_streams(void **state)
{
	(void)state;
	bytes_words(bytes, LENGTH, 12);
	for (size_t i = 0; i < sizeof(decoders) / sizeof(*decoders); i++) {
		if (system(decoders[i].present) != 0) {
			printf("skipped: no other decoder for %s here\n",
			       decoders[i].codec);
			continue;
		}
		for (size_t j = 0; j < 3; j++)
			check_level(&decoders[i], decoders[i].levels[j]);
	}
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(other_programs_decode_our_streams),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
