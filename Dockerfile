# docker build --build-arg VERSION=v1.2.3 -t ridgehop .
# docker run -p 8080:8080 -v ridgehop-data:/data -v /my/rasters:/rasters:ro ridgehop

FROM golang:1.27-bookworm AS build
RUN apt-get update \
    && apt-get install -y --no-install-recommends libgdal-dev libsqlite3-dev pkg-config \
    && rm -rf /var/lib/apt/lists/*
# The image holds its own toolchain fast; go.mod names the one that is tested.
ENV GOTOOLCHAIN=auto CGO_ENABLED=1
WORKDIR /src
COPY go.mod go.sum ./
RUN go mod download
COPY . .
ARG VERSION=
RUN go build -trimpath -tags libsqlite3 -ldflags "-s -w -X main.version=${VERSION}" -o /out/ridgehop ./cmd/ridgehop

FROM debian:bookworm-slim
# The same Debian as above, for the same GDAL. proj-data holds geoid grids.
RUN apt-get update \
    && apt-get install -y --no-install-recommends ca-certificates libgdal32 libsqlite3-0 proj-data \
    && rm -rf /var/lib/apt/lists/* \
    && useradd --uid 10001 --user-group --no-create-home --shell /usr/sbin/nologin ridgehop \
    && install -d -o ridgehop -g ridgehop /data /rasters
COPY --from=build /out/ridgehop /usr/local/bin/ridgehop

# GDAL registers its drivers before main starts, so what a raster could abuse is
# taken out here: drivers that fetch addresses, run expressions, bundle files or
# ask databases, plugins, sidecar files and folder listings. The rest bounds
# reads over the network.
ENV GDAL_SKIP="VRT DERIVED HTTP WMS WMTS WCS OGCAPI STACIT STACTA PLMOSAIC DAAS EEDA EEDAI MRF Rasterlite PostGISRaster MBTiles PDF GRIB netCDF HDF4 HDF4Image HDF5 HDF5Image BAG Zarr HEIF JP2OpenJPEG OGR_VRT GMLAS CSW WFS OAPIF NGW Carto AmigoCloud Elasticsearch PLSCENES GPKG SQLite PostgreSQL MySQL ODBC PGeo MSSQLSpatial" \
    GDAL_DRIVER_PATH=disable \
    GDAL_DISABLE_READDIR_ON_OPEN=EMPTY_DIR \
    GDAL_PAM_ENABLED=NO \
    GDAL_CACHEMAX=64 \
    CPL_VSIL_CURL_ALLOWED_EXTENSIONS=.tif \
    GDAL_HTTP_TIMEOUT=10 \
    GDAL_HTTP_CONNECTTIMEOUT=3 \
    GDAL_HTTP_MAX_RETRY=2 \
    VSI_CACHE=TRUE \
    PROJ_NETWORK=OFF

ENV RIDGEHOP_LISTEN=0.0.0.0:8080 \
    RIDGEHOP_DATA=/data \
    RIDGEHOP_RASTERS=/rasters \
    RIDGEHOP_LOG_JSON=true
USER ridgehop
WORKDIR /data
VOLUME ["/data", "/rasters"]
EXPOSE 8080
ENTRYPOINT ["/usr/local/bin/ridgehop"]
CMD ["serve"]
