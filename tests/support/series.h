/* Published series that block lengths and standard errors are checked on. */
#ifndef SUPPORT_SERIES_H
#define SUPPORT_SERIES_H

/* Canadian lynx trapped by year, 1821 to 1934: Elton and Nicholson 1942. */
extern const double series_lynx[114];
/* Mean yearly temperature in New Haven, degrees F, 1912 to 1971: Vaux and
 * Brinker 1972. */
extern const double series_warmth[60];
/* Yearly sunspot numbers, 1700 to 1988: World Data Center SIDC, Brussels. */
extern const double series_sunspots[289];

#endif
