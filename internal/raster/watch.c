#include "watch.h"
#include "_cgo_export.h"

#include <cpl_conv.h>
#include <cpl_error.h>
#include <cpl_string.h>
#include <cpl_vsi.h>
#include <cpl_vsi_error.h>
#include <string.h>

static int begins(const char *text, const char *with) { return strncmp(text, with, strlen(with)) == 0; }

/* heard passes on the words about requests. Of a request's own head only the
   first line goes further: the others hold credentials. */
static void CPL_STDCALL heard(CPLErr class, CPLErrorNum number, const char *text)
{
    (void)number;
    if (class != CE_Debug || text == NULL)
        return;
    size_t length = strlen(text);
    if (begins(text, "CURL_INFO_HEADER_OUT: "))
        length = strcspn(text, "\r\n");
    else if (!begins(text, "CURL_INFO_HEADER_IN: ") && !begins(text, "VSICURL: ") && !begins(text, "S3: "))
        return;
    ridgehopHeard((uintptr_t)CPLGetErrorHandlerUserData(), (char *)text, (int)length);
}

void ridgehop_watch(uintptr_t handle)
{
    CPLPushErrorHandlerEx(heard, (void *)handle);
    CPLSetThreadLocalConfigOption("CPL_DEBUG", "CURL_INFO_HEADER_IN CURL_INFO_HEADER_OUT VSICURL S3");
    CPLSetThreadLocalConfigOption("CPL_CURL_VERBOSE", "YES");
    VSIErrorReset();
}

/* GDAL has no call for this. It takes the proxy anew for each request, and curl
   knows no such proxy. One that is set for the whole process goes before it. */
void ridgehop_stop(void)
{
    CPLSetThreadLocalConfigOption("GDAL_HTTP_PROXY", "stopped://");
    CPLSetThreadLocalConfigOption("GDAL_HTTPS_PROXY", "stopped://");
}

void ridgehop_unwatch(void)
{
    CPLSetThreadLocalConfigOption("GDAL_HTTPS_PROXY", NULL);
    CPLSetThreadLocalConfigOption("GDAL_HTTP_PROXY", NULL);
    CPLSetThreadLocalConfigOption("CPL_CURL_VERBOSE", NULL);
    CPLSetThreadLocalConfigOption("CPL_DEBUG", NULL);
    CPLPopErrorHandler();
}

void ridgehop_head(const char *path) { CSLDestroy(VSIGetFileMetadata(path, "HEADERS", NULL)); }

void ridgehop_purge(const char *path) { VSICurlPartialClearCache(path); }

void ridgehop_purge_all(void) { VSICurlClearCache(); }

int ridgehop_vsi_error(void) { return VSIGetLastErrorNo(); }

void ridgehop_option(const char *key, const char *value) { CPLSetConfigOption(key, value); }
