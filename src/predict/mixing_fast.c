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

/* As in mixing_plain.c, two times sixteen at once. */
ALWAYS_INLINE int32_t lanes_dot(const int16_t *a, const int16_t *b,
				unsigned count)
{
	__m256i sum = _mm256_setzero_si256();
	__m128i half;

	for (unsigned i = 0; i < count; i += 32) {
		const __m256i *x = (const __m256i *)(a + i);
		const __m256i *w = (const __m256i *)(b + i);
		__m256i low = _mm256_madd_epi16(x[0], w[0]);
		__m256i high = _mm256_madd_epi16(x[1], w[1]);

		sum = _mm256_add_epi32(sum, _mm256_add_epi32(low, high));
	}
	half = _mm_add_epi32(_mm256_castsi256_si128(sum),
			     _mm256_extracti128_si256(sum, 1));
	half = _mm_add_epi32(half, _mm_shuffle_epi32(half, 0x4e));
	half = _mm_add_epi32(half, _mm_shuffle_epi32(half, 0xb1));
	return _mm_cvtsi128_si32(half);
}

ALWAYS_INLINE void lanes_train(const int16_t *inputs, int16_t *weights,
			       unsigned count, int16_t step)
{
	__m256i steps = _mm256_set1_epi16(step);

	for (unsigned i = 0; i < count; i += 32) {
		const __m256i *x = (const __m256i *)(inputs + i);
		__m256i *w = (__m256i *)(weights + i);

		w[0] = _mm256_adds_epi16(w[0],
					 _mm256_mulhrs_epi16(x[0], steps));
		w[1] = _mm256_adds_epi16(w[1],
					 _mm256_mulhrs_epi16(x[1], steps));
	}
}

#define LANES_PREDICT fast_predict
#define LANES_UPDATE fast_update
#define LANES_BYTE fast_byte
#include "predict/mixing.inc"

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
