#include <stdint.h>

/* Between the two, what GDAL says of its HTTP requests on this thread goes to
   the Go function that the handle stands for. */
void ridgehop_watch(uintptr_t handle);
void ridgehop_unwatch(void);

/* From here to unwatch no request of this thread gets out. */
void ridgehop_stop(void);

/* These are for GDAL's handlers of network files. */
void ridgehop_head(const char *path);
void ridgehop_purge(const char *path);
void ridgehop_purge_all(void);

int ridgehop_vsi_error(void);

void ridgehop_option(const char *key, const char *value);
