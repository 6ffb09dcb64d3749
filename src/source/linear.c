#include "source/linear.h"

#include <math.h>

static size_t pivot_find(const double *matrix, size_t n, size_t k)
{
	size_t best = k;

	for (size_t i = k + 1; i < n; i++) {
		if (fabs(matrix[i * n + k]) > fabs(matrix[best * n + k]))
			best = i;
	}
	return best;
}

static void swap_rows(double *matrix, double *b, size_t n, size_t i, size_t j)
{
	double held = b[i];

	b[i] = b[j];
	b[j] = held;
	for (size_t c = 0; c < n; c++) {
		held = matrix[i * n + c];
		matrix[i * n + c] = matrix[j * n + c];
		matrix[j * n + c] = held;
	}
}

static void eliminate_below(double *matrix, double *b, size_t n, size_t k)
{
	const double *top = matrix + k * n;

	for (size_t i = k + 1; i < n; i++) {
		double *row = matrix + i * n;
		double share = row[k] / top[k];

		if (share < 0 || share > 0) {
			for (size_t c = k; c < n; c++)
				row[c] -= share * top[c];
			b[i] -= share * b[k];
		}
	}
}

enum status linear_solve(double *matrix, double *b, size_t n)
{
	for (size_t k = 0; k < n; k++) {
		size_t pivot = pivot_find(matrix, n, k);

		if (!(fabs(matrix[pivot * n + k]) > 0))
			return STATUS_BAD_INPUT;
		if (pivot != k)
			swap_rows(matrix, b, n, pivot, k);
		eliminate_below(matrix, b, n, k);
	}
	for (size_t k = n; k-- > 0;) {
		for (size_t c = k + 1; c < n; c++)
			b[k] -= matrix[k * n + c] * b[c];
		b[k] /= matrix[k * n + k];
	}
	return STATUS_OK;
}
