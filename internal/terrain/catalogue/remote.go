package catalogue

import (
	"net/url"
	"strings"
)

// The two ways to what is not on disk, in the raster library's words.
const (
	viaHTTP = "/vsicurl/"
	viaS3   = "/vsis3/"
)

// Remote reports whether a path leads to another machine:
// /vsicurl/https://..., /vsicurl/http://... or /vsis3/bucket/...
func Remote(path string) bool {
	return strings.HasPrefix(path, viaHTTP+"https://") ||
		strings.HasPrefix(path, viaHTTP+"http://") ||
		strings.HasPrefix(path, viaS3)
}

// unfitRemote says what is wrong with the remote path of a file, or is empty.
func unfitRemote(path string) string {
	if strings.HasSuffix(path, "/") {
		return "it ends in a slash and so names no file"
	}
	return unfitRoot(path)
}

// unfitRoot says what is wrong with a remote path, which may end in a slash.
func unfitRoot(path string) string {
	host, key, _ := strings.Cut(address(path), "/")
	switch {
	case strings.ContainsAny(path, "?#"):
		return "an address has no query and no fragment here"
	case strings.Contains(host, "@"):
		return "an address has no user in it: keys belong in the environment"
	case strings.ContainsAny(path, `\ `):
		return "an address has no backslash and no space"
	case unfitKey(key) != "":
		return unfitKey(key)
	case strings.HasPrefix(path, viaS3) && !isBucket(host):
		return "after /vsis3/ comes the name of a bucket"
	case strings.HasPrefix(path, viaHTTP) && !isAddress(path):
		return "after /vsicurl/ comes a whole address, like https://host/folder/"
	}
	return ""
}

// address is what follows the prefix and the scheme.
func address(path string) string {
	for _, prefix := range []string{viaHTTP + "https://", viaHTTP + "http://", viaS3} {
		if after, ok := strings.CutPrefix(path, prefix); ok {
			return after
		}
	}
	return path
}

func isBucket(name string) bool {
	const letters = "abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ0123456789"
	return name != "" && strings.Trim(name, letters+"._-") == "" && strings.Trim(name, ".") != ""
}

func isAddress(path string) bool {
	parsed, err := url.Parse(strings.TrimPrefix(path, viaHTTP))
	return err == nil && parsed.Hostname() != ""
}

// unfitKey looks at the segments of an address, and at what a server may make of
// those with a percent sign.
func unfitKey(key string) string {
	for segment := range strings.SplitSeq(strings.TrimSuffix(key, "/"), "/") {
		decoded, err := url.PathUnescape(segment)
		switch {
		case segment == "" && key != "":
			return "it has two slashes in a row"
		case err != nil:
			return "it has a % that is not followed by two hexadecimal digits"
		case decoded == ".", decoded == "..", strings.ContainsAny(decoded, `/\`):
			return "an address has no . or .. for a folder, and no hidden slash"
		}
	}
	return ""
}
