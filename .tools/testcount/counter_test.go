package main

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func TestRun(t *testing.T) {
	for _, c := range []struct {
		name, events, wantOut, wantSummary, wantErr string
	}{
		{
			name: "subtests count, a pass is silent, a failure is shown",
			events: `{"Action":"start","Package":"m/a"}
{"Action":"run","Package":"m/a","Test":"TestOne"}
{"Action":"output","Package":"m/a","Test":"TestOne","Output":"quiet\n"}
{"Action":"run","Package":"m/a","Test":"TestOne/sub"}
{"Action":"pass","Package":"m/a","Test":"TestOne/sub"}
{"Action":"pass","Package":"m/a","Test":"TestOne"}
{"Action":"run","Package":"m/a","Test":"TestTwo"}
{"Action":"output","Package":"m/a","Test":"TestTwo","Output":"got 1\n"}
{"Action":"fail","Package":"m/a","Test":"TestTwo"}
{"Action":"output","Package":"m/a","Output":"FAIL\n"}
{"Action":"fail","Package":"m/a","Elapsed":0.5}
`,
			wantOut:     "got 1\nFAIL m/a                                      2 passed, 1 failed (0.5 s)\n",
			wantSummary: "2 passed, 1 failed, 0 skipped\n",
			wantErr:     "1 failed",
		},
		{
			name: "a skip is listed with its reason",
			events: `{"Action":"run","Package":"m/a","Test":"TestOne"}
{"Action":"output","Package":"m/a","Test":"TestOne","Output":"=== RUN   TestOne\n"}
{"Action":"output","Package":"m/a","Test":"TestOne","Output":"    a_test.go:7: no rasters: see README\n"}
{"Action":"output","Package":"m/a","Test":"TestOne","Output":"--- SKIP: TestOne (0.00s)\n"}
{"Action":"skip","Package":"m/a","Test":"TestOne"}
{"Action":"run","Package":"m/a","Test":"TestTwo"}
{"Action":"pass","Package":"m/a","Test":"TestTwo"}
{"Action":"output","Package":"m/a","Output":"ok  \tm/a\t(cached)\n"}
{"Action":"pass","Package":"m/a"}
`,
			wantOut:     "ok   m/a                                      1 passed, 1 skipped (cached)\n",
			wantSummary: "skipped  m/a TestOne: no rasters: see README\n1 passed, 0 failed, 1 skipped\n",
		},
		{
			name: "a package that does not build counts as one failure",
			events: `{"ImportPath":"m/b [m/b.test]","Action":"build-output","Output":"b.go:3: undefined: x\n"}
{"ImportPath":"m/b [m/b.test]","Action":"build-fail"}
{"Action":"start","Package":"m/b"}
{"Action":"output","Package":"m/b","Output":"FAIL\tm/b [build failed]\n"}
{"Action":"fail","Package":"m/b","FailedBuild":"m/b [m/b.test]"}
`,
			wantOut: "b.go:3: undefined: x\nFAIL\tm/b [build failed]\n" +
				"FAIL m/b                                      0 passed, 1 failed (0.0 s)\n",
			wantSummary: "0 passed, 1 failed, 0 skipped\n",
			wantErr:     "1 failed",
		},
		{
			name: "a test that a crash left open has failed",
			events: `{"Action":"run","Package":"m/a","Test":"TestOne"}
{"Action":"output","Package":"m/a","Test":"TestOne","Output":"panic: x\n"}
{"Action":"fail","Package":"m/a"}
`,
			wantOut: "panic: x\n--- FAIL: TestOne (did not end)\n" +
				"FAIL m/a                                      0 passed, 1 failed (0.0 s)\n",
			wantSummary: "0 passed, 1 failed, 0 skipped\n",
			wantErr:     "1 failed",
		},
		{
			name: "a package without tests is named",
			events: `{"Action":"start","Package":"m/a"}
{"Action":"output","Package":"m/a","Output":"?   \tm/a\t[no test files]\n"}
{"Action":"skip","Package":"m/a"}
`,
			wantOut:     "none m/a                                      no tests\n",
			wantSummary: "0 passed, 0 failed, 0 skipped\n",
			wantErr:     "no test ran",
		},
		{
			name:        "a stream cut short has failed",
			events:      `{"Action":"start","Package":"m/a"}` + "\n",
			wantOut:     "FAIL m/a                                      0 passed, 1 failed (0.0 s)\n",
			wantSummary: "0 passed, 1 failed, 0 skipped\n",
			wantErr:     "1 failed",
		},
		{
			name:        "no test at all is a failure, and other text is shown",
			events:      "go: warning: \"./...\" matched no packages\n",
			wantOut:     "go: warning: \"./...\" matched no packages\n",
			wantSummary: "0 passed, 0 failed, 0 skipped\n",
			wantErr:     "no test ran",
		},
	} {
		t.Run(c.name, func(t *testing.T) {
			file := filepath.Join(t.TempDir(), "summary")
			var out strings.Builder
			err := run([]string{file}, strings.NewReader(c.events), &out)
			gotErr := ""
			if err != nil {
				gotErr = err.Error()
			}
			summary, readErr := os.ReadFile(file)
			if readErr != nil {
				t.Fatal(readErr)
			}
			if gotErr != c.wantErr {
				t.Errorf("error %q, want %q", gotErr, c.wantErr)
			}
			if out.String() != c.wantOut {
				t.Errorf("output\n%s\nwant\n%s", out.String(), c.wantOut)
			}
			if string(summary) != c.wantSummary {
				t.Errorf("summary %q, want %q", summary, c.wantSummary)
			}
		})
	}
}
