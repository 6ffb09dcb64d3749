/* Where the codec host and the example codecs of a build lie. */
#ifndef SUPPORT_HOUSE_PLACE_H
#define SUPPORT_HOUSE_PLACE_H

#define PLACE_BYTES 4200

/* The path of a file in the build folder that the running test lies in. */
const char *house_place(const char *name, char path[PLACE_BYTES]);

#endif
