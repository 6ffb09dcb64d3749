#include "predict/parts.h"

#if defined(__x86_64__)

#include <immintrin.h>

#ifdef __clang__
#pragma clang attribute push(__attribute__((target("avx2"))), \
			     apply_to = function)
#else
#pragma GCC push_options
#pragma GCC target("avx2")
#endif

/* As in mixing_plain.c, sixteen at a time. */
static inline int32_t lanes_dot(const int16_t *a, const int16_t *b,
				unsigned count)
{
	__m256i sum = _mm256_setzero_si256();
	__m128i half;

	for (unsigned i = 0; i < count; i += 16) {
		__m256i x = _mm256_load_si256((const __m256i *)(a + i));
		__m256i w = _mm256_load_si256((const __m256i *)(b + i));

		sum = _mm256_add_epi32(sum, _mm256_madd_epi16(x, w));
	}
	half = _mm_add_epi32(_mm256_castsi256_si128(sum),
			     _mm256_extracti128_si256(sum, 1));
	half = _mm_add_epi32(half, _mm_shuffle_epi32(half, 0x4e));
	half = _mm_add_epi32(half, _mm_shuffle_epi32(half, 0xb1));
	return _mm_cvtsi128_si32(half);
}

static inline void lanes_train(const int16_t *inputs, int16_t *weights,
			       unsigned count, int16_t step)
{
	__m256i steps = _mm256_set1_epi16(step);

	for (unsigned i = 0; i < count; i += 16) {
		__m256i x = _mm256_load_si256((const __m256i *)(inputs + i));
		__m256i *w = (__m256i *)(weights + i);

		_mm256_store_si256(
			w, _mm256_adds_epi16(_mm256_load_si256(w),
					     _mm256_mulhrs_epi16(x, steps)));
	}
}

#define LANES_PREDICT fast_predict
#define LANES_UPDATE fast_update
#define LANES_BYTE fast_byte
#include "predict/mixing.h"

#ifdef __clang__
#pragma clang attribute pop
#else
#pragma GCC pop_options
#endif

static const struct lanes lanes_avx2 = {
	.predict = fast_predict,
	.update = fast_update,
	.byte = fast_byte,
};

const struct lanes *lanes_fast(void)
{
	return __builtin_cpu_supports("avx2") ? &lanes_avx2 : NULL;
}

#else

const struct lanes *lanes_fast(void)
{
	return NULL;
}

#endif
