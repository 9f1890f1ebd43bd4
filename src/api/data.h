/* Where the data are. */
#ifndef API_DATA_H
#define API_DATA_H

#include "base/file.h"

/* The data folder: $SEPTUM_DATA, else `<folder of the executable>/../share/septum`. NULL and a
 * message when it cannot be told. */
const char *data_folder(arena *a, diag_list *d);
/* Path of the price book that <data folder>/prices/default names. NULL and a message when there is
 * none. */
const char *data_default_prices(arena *a, diag_list *d);

#endif
