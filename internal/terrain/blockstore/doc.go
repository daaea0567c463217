// Package blockstore keeps decoded blocks in a folder, bounded in bytes, so
// that a restart or another process need not decode them again.
//
// It is a cache: any value may be gone at any time, and a value that is there
// is the one that was put, whole, or it counts as gone. Each file carries its
// length, its key and a checksum, which are held against it at every Get.
//
// Files are written under another name and renamed, so no reader sees a half
// of one. They are not synced to the disk: after a power cut a file may be
// short or full of zeros, which its length and checksum tell, and a block that
// is lost is decoded again from its raster. Waiting for the disk at every block
// would buy nothing.
//
// Several processes may share a folder. Each bounds what it knows of, and looks
// again at what the others have added whenever it has written a sixteenth of
// its bound; so n processes of one bound keep the folder below that bound and n
// sixteenths of it.
package blockstore
