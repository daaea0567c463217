package raster

import (
	"bytes"
	"net/http"
	"net/http/httptest"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/johannesboyne/gofakes3"
	"github.com/johannesboyne/gofakes3/backend/s3mem"
	"golang.org/x/sys/unix"
)

// secretKey and accessKey are what GDAL signs with in these tests.
const (
	accessKey = "AKIAEXAMPLE"
	secretKey = "an-example-of-a-secret"
)

// bucket is an S3 server in this process with one bucket, "dem".
type bucket struct {
	backend *s3mem.Backend
	counter *server // counts, and answers otherwise if it likes
}

// serveBucket starts the server and points GDAL to it until the test ends.
func serveBucket(t testing.TB) *bucket {
	t.Helper()
	b := &bucket{backend: s3mem.New()}
	must(t, b.backend.CreateBucket("dem"))
	s3 := gofakes3.New(b.backend, gofakes3.WithLogger(gofakes3.DiscardLog())).Server()
	b.counter = serve(t, nil)
	b.counter.set(func() {
		b.counter.instead = func(w http.ResponseWriter, r *http.Request) bool {
			s3.ServeHTTP(w, r)
			return true
		}
	})
	withOptions(t, map[string]string{
		"AWS_ACCESS_KEY_ID": accessKey, "AWS_SECRET_ACCESS_KEY": secretKey, "AWS_REGION": "us-east-1",
		"AWS_S3_ENDPOINT": strings.TrimPrefix(b.counter.URL, "http://"), "AWS_HTTPS": "NO", "AWS_VIRTUAL_HOSTING": "FALSE",
	})
	return b
}

// withOptions sets options of GDAL's until the test ends.
func withOptions(t testing.TB, options map[string]string) {
	t.Helper()
	for key, value := range options {
		setOption(key, value)
		t.Cleanup(func() { setOption(key, "") })
	}
}

func (b *bucket) put(t testing.TB, key string, content []byte) {
	t.Helper()
	_, err := b.backend.PutObject("dem", key, map[string]string{"Last-Modified": "Mon, 06 May 2024 07:08:09 GMT"}, bytes.NewReader(content), int64(len(content)), nil)
	must(t, err)
}

func TestS3ReadsAsLocal(t *testing.T) {
	b, library := serveBucket(t), quick(t)
	path := remoteTIFF(t, 300, "COMPRESS=NONE", "OVERVIEWS=NONE")
	b.put(t, "alps/made.tif", readFile(t, path))
	d := openRemote(t, library, "/vsis3/dem/alps/made.tif")
	requests, _ := b.counter.taken()
	want := []asked{{"GET", "/dem/alps/made.tif", "bytes=0-16383"}} // GDAL asks no HEAD of S3, and keeps the first bytes
	if diff := cmp.Diff(requests, want, cmp.AllowUnexported(asked{})); diff != "" {
		t.Errorf("opening: requests (-got +want):\n%s", diff)
	}
	heights, err := readBlock(d, 1, 1)
	must(t, err)
	if wrong := rightBlock(heights, 1, 1, 300); wrong != "" {
		t.Error(wrong)
	}
	if requests, _ = b.counter.taken(); len(requests) != 1 {
		t.Errorf("a block: got %v, want one request", requests)
	}
	if difference := alike(whole(t, d), whole(t, open(t, path)), 0); difference != "" {
		t.Error(difference)
	}
	version, err := library.RemoteVersion("/vsis3/dem/alps/made.tif")
	must(t, err)
	if version != d.Version() {
		t.Errorf("got version %s, want %s", version, d.Version())
	}
}

func TestS3Absent(t *testing.T) {
	library := quick(t)
	b := serveBucket(t)
	b.put(t, "there.tif", []byte("any"))
	for path, want := range map[string]error{
		"/vsis3/dem/not/there.tif":    ErrAbsent,
		"/vsis3/nothing/at/there.tif": ErrUnreachable, // no such bucket: a setting is wrong, the tile is not missing
	} {
		_, opened := library.OpenRemote(path)
		_, version := library.RemoteVersion(path)
		for _, got := range []error{opened, version} {
			checkFault(t, path, got, want)
			silent(t, got, accessKey, secretKey, "nothing")
		}
	}
	path := remoteTIFF(t, 0)
	b.put(t, "not/there.tif", readFile(t, path))
	openRemote(t, library, "/vsis3/dem/not/there.tif")
}

func TestS3Replaced(t *testing.T) {
	b, library := serveBucket(t), quick(t)
	const tile = "/vsis3/dem/made.tif"
	b.put(t, "made.tif", readFile(t, remoteTIFF(t, 0, "COMPRESS=NONE", "OVERVIEWS=NONE")))
	old := openRemote(t, library, tile)
	_, err := readBlock(old, 0, 0)
	must(t, err)
	b.put(t, "made.tif", readFile(t, remoteTIFF(t, 1000, "COMPRESS=NONE", "OVERVIEWS=NONE")))
	version, err := library.RemoteVersion(tile)
	must(t, err)
	if version == old.Version() {
		t.Errorf("got version %s again, want another", version)
	}
	checkFault(t, "unchanged", old.Unchanged(), ErrChanged)
	for _, at := range []int{0, 1} {
		_, err = readBlock(old, at, at)
		checkFault(t, "the old handle", err, ErrChanged)
	}
	heights, err := readBlock(openRemote(t, library, tile), 1, 1)
	must(t, err)
	if wrong := rightBlock(heights, 1, 1, 1000); wrong != "" {
		t.Error(wrong)
	}
}

func TestS3Fails(t *testing.T) {
	b, library := serveBucket(t), quick(t)
	b.put(t, "made.tif", readFile(t, remoteTIFF(t, 0)))
	s3 := b.counter.instead
	denied := `<?xml version="1.0"?><Error><Code>AccessDenied</Code><Message>` + secretKey + `</Message></Error>`
	other := serve(t, nil)
	moved := func(s *server) string {
		return `<?xml version="1.0"?><Error><Code>PermanentRedirect</Code><Message>m</Message><Endpoint>` + strings.TrimPrefix(s.URL, "http://") + `</Endpoint></Error>`
	}
	region := `<?xml version="1.0"?><Error><Code>AuthorizationHeaderMalformed</Code><Message>m</Message><Region>eu-west-1</Region></Error>`
	for name, instead := range map[string]func(http.ResponseWriter, *http.Request) bool{
		"403": text(403, denied),
		"503": status(503),
		// GDAL alone sends its signed requests there, for this bucket from now on.
		"moved": text(301, moved(other)),
		// GDAL alone follows these two until the process is out of stack.
		"moved, without end":        text(301, moved(b.counter)),
		"other region, without end": text(400, region),
	} {
		b.counter.set(func() { b.counter.instead = instead })
		_, err := library.OpenRemote("/vsis3/dem/made.tif")
		checkFault(t, name, err, ErrUnreachable)
		silent(t, err, accessKey, secretKey)
		b.counter.set(func() { b.counter.instead = s3 })
		openRemote(t, library, "/vsis3/dem/made.tif").Close()
	}
	if requests, _ := other.taken(); len(requests) != 0 {
		t.Errorf("moved: got %v at the other place, want nothing sent there", requests)
	}
	b.put(t, "empty.tif", nil)
	_, err := library.OpenRemote("/vsis3/dem/empty.tif")
	checkFault(t, "empty", err, ErrUnreadable)
}

func text(code int, body string) func(http.ResponseWriter, *http.Request) bool {
	return func(w http.ResponseWriter, _ *http.Request) bool {
		w.WriteHeader(code)
		_, _ = w.Write([]byte(body))
		return true
	}
}

// noKeys takes the keys away, and leaves a machine's role as the only way to
// get some.
func noKeys(t testing.TB, role string) {
	t.Helper()
	for _, key := range []string{"AWS_ACCESS_KEY_ID", "AWS_SECRET_ACCESS_KEY", "AWS_SESSION_TOKEN", "AWS_PROFILE"} {
		if os.Getenv(key) != "" {
			t.Skipf("%s is set in the environment", key)
		}
	}
	none := filepath.Join(t.TempDir(), "none")
	withOptions(t, map[string]string{
		"AWS_ACCESS_KEY_ID": "", "AWS_SECRET_ACCESS_KEY": "", "CPL_AWS_CREDENTIALS_FILE": none, "AWS_CONFIG_FILE": none,
		"CPL_AWS_AUTODETECT_EC2": "NO", "CPL_AWS_EC2_API_ROOT_URL": role,
	})
}

func TestS3NoCredentials(t *testing.T) {
	b, library := serveBucket(t), quick(t)
	noKeys(t, "http://127.0.0.1:1")
	_, err := library.OpenRemote("/vsis3/dem/made.tif")
	checkFault(t, "no credentials", err, ErrUnreachable)
	if err == nil || !strings.Contains(err.Error(), "AWS_ACCESS_KEY_ID") {
		t.Errorf("got %v, want it to say what is missing", err)
	}
	if requests, _ := b.counter.taken(); len(requests) != 0 {
		t.Errorf("got %v, want no request without credentials", requests)
	}
}

// Where a machine's role gives the credentials, GDAL asks the cloud for them in
// the middle of its work, and keeps its log from the watch while it does.
func TestS3CredentialsOfRole(t *testing.T) {
	b, library := serveBucket(t), quick(t)
	b.put(t, "made.tif", readFile(t, remoteTIFF(t, 0)))
	const token = "a-token-of-the-machine"
	role := httptest.NewServer(http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		switch {
		case r.Method == http.MethodPut:
			_, _ = w.Write([]byte(token))
		case strings.HasSuffix(r.URL.Path, "/security-credentials/"):
			_, _ = w.Write([]byte("reader"))
		default:
			_, _ = w.Write([]byte(`{"AccessKeyId":"` + accessKey + `","SecretAccessKey":"` + secretKey + `","Token":"t","Expiration":"2999-01-01T00:00:00Z"}`))
		}
	}))
	defer role.Close()
	noKeys(t, role.URL)
	printed := standardError(t, func() {
		d, err := library.OpenRemote("/vsis3/dem/made.tif")
		if err != nil {
			t.Errorf("got %v, want the file open by the role's credentials", err)
			return
		}
		d.Close()
	})
	if printed != "" {
		t.Errorf("got %q printed, want nothing", printed)
	}
	if requests, _ := b.counter.taken(); len(requests) != 1 {
		t.Errorf("got %v, want one request", requests)
	}
}

// standardError is what is printed meanwhile, by C too.
func standardError(t testing.TB, during func()) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), "printed")
	file, err := os.Create(path)
	must(t, err)
	defer file.Close()
	kept, err := unix.Dup(2)
	must(t, err)
	must(t, unix.Dup2(int(file.Fd()), 2))
	during()
	must(t, unix.Dup2(kept, 2))
	must(t, unix.Close(kept))
	return string(readFile(t, path))
}
