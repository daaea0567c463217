package terrain

import (
	"context"
	"fmt"

	"github.com/maypok86/otter/v2"

	"ridgehop/internal/raster"
	"ridgehop/profile"
)

// chunk is a rectangle of decoded pixels of one raster. It never changes.
type chunk struct {
	x, y, width, height int // in the raster's own pixels
	heights             []float32
}

// chunkKey names a chunk: the raster and the chunk's column and row in it.
type chunkKey struct {
	entry        *entry
	column, line int
}

// chunkPixels is the least size that a chunk aims for: big enough that a path
// crosses few of them, small enough that a cold path reads little.
const chunkPixels = 256 << 10

// chunkSize is a whole number of GDAL blocks each way, so that every block is
// decoded once.
func chunkSize(info raster.Info) (width, height int) {
	width, height = info.BlockWidth, info.BlockHeight
	for width < 256 && 2*width*height <= chunkPixels {
		width += info.BlockWidth
	}
	if pixels := width * height; pixels < chunkPixels {
		height *= (chunkPixels + pixels - 1) / pixels
	}
	return width, height
}

// chunks is the cache: bounded in bytes, and each chunk is read once however
// many ask for it at the same time.
type chunks struct {
	cache   *otter.Cache[chunkKey, *chunk]
	handles *handles
}

func newChunks(bytes uint64, h *handles) (*chunks, error) {
	cache, err := otter.New(&otter.Options[chunkKey, *chunk]{
		MaximumWeight: bytes,
		Weigher:       func(_ chunkKey, c *chunk) uint32 { return uint32(4 * len(c.heights)) }, // #nosec G115 -- at most 32 MiB
	})
	if err != nil {
		return nil, fmt.Errorf("block cache: %w", err)
	}
	return &chunks{cache: cache, handles: h}, nil
}

// at returns the chunk of the raster that holds its pixel (x, y).
func (c *chunks) at(ctx context.Context, e *entry, x, y int) (*chunk, error) {
	width, height := chunkSize(e.info)
	key := chunkKey{e, x / width, y / height}
	if found, ok := c.cache.GetIfPresent(key); ok {
		return found, nil
	}
	found, err := c.cache.Get(ctx, key, otter.LoaderFunc[chunkKey, *chunk](c.read))
	switch {
	case err == nil:
		return found, nil
	case ctx.Err() != nil:
		return nil, ctx.Err()
	}
	return nil, &profile.UnreadableError{Raster: e.Name, Err: err}
}

// read decodes one chunk. Others may wait for it, so it does not stop when the
// first to ask goes away.
func (c *chunks) read(ctx context.Context, key chunkKey) (*chunk, error) {
	info := key.entry.info
	width, height := chunkSize(info)
	out := &chunk{x: key.column * width, y: key.line * height}
	out.width = min(width, info.Width-out.x)
	out.height = min(height, info.Height-out.y)
	out.heights = make([]float32, out.width*out.height)
	err := c.handles.with(context.WithoutCancel(ctx), key.entry, func(d *raster.Dataset) error {
		if err := key.entry.unchanged(); err != nil {
			return err
		}
		return d.Read(out.x, out.y, out.width, out.height, out.heights)
	})
	return out, err
}
