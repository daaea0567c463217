package terrain

import (
	"context"
	"encoding/binary"
	"errors"
	"fmt"
	"math"

	"github.com/maypok86/otter/v2"

	"ridgehop/internal/raster"
	"ridgehop/internal/terrain/blockstore"
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
	disk    *blockstore.Store // of remote rasters; may be nil
}

func newChunks(bytes uint64, h *handles, disk *blockstore.Store) (*chunks, error) {
	cache, err := otter.New(&otter.Options[chunkKey, *chunk]{
		MaximumWeight: bytes,
		Weigher:       func(_ chunkKey, c *chunk) uint32 { return uint32(4 * len(c.heights)) }, // #nosec G115 -- at most 32 MiB
	})
	if err != nil {
		return nil, fmt.Errorf("block cache: %w", err)
	}
	return &chunks{cache: cache, handles: h, disk: disk}, nil
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
	if c.fromDisk(key, out) {
		return out, nil
	}
	err := c.handles.with(context.WithoutCancel(ctx), key.entry, func(d *raster.Dataset) error {
		if err := d.Read(out.x, out.y, out.width, out.height, out.heights); err != nil {
			return err
		}
		return key.entry.current(d)
	})
	switch {
	case err == nil:
		c.toDisk(key, out)
	case errors.Is(err, raster.ErrChanged):
		key.entry.gone.Store(true)
	}
	return out, err
}

// diskKey names a chunk of a remote raster's version; what it holds depends on
// how chunks are cut, so the size is part of it.
func (key chunkKey) diskKey(out *chunk) string {
	return fmt.Sprintf("%s %s %d %d %d %d", key.entry.path, key.entry.known, out.x, out.y, out.width, out.height)
}

// fromDisk fills the chunk from the disk, if it is there.
func (c *chunks) fromDisk(key chunkKey, out *chunk) bool {
	if c.disk == nil || !key.entry.remote {
		return false
	}
	kept, ok := c.disk.Get(key.diskKey(out), nil)
	if !ok || len(kept) != 4*len(out.heights) {
		return false
	}
	for i := range out.heights {
		out.heights[i] = math.Float32frombits(binary.LittleEndian.Uint32(kept[4*i:]))
	}
	return true
}

// toDisk keeps a chunk. A disk that takes nothing more costs speed, not answers.
func (c *chunks) toDisk(key chunkKey, out *chunk) {
	if c.disk == nil || !key.entry.remote {
		return
	}
	raw := make([]byte, 0, 4*len(out.heights))
	for _, h := range out.heights {
		raw = binary.LittleEndian.AppendUint32(raw, math.Float32bits(h))
	}
	_ = c.disk.Put(key.diskKey(out), raw)
}
