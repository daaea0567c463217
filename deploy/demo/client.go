package main

import (
	"bytes"
	"context"
	"encoding/json"
	"fmt"
	"io"
	"net/http"
	"os"
	"time"
)

// answer is what the table shows of an assessment.
type answer struct {
	ID      string `json:"id"`
	Verdict string `json:"verdict"`
	Path    struct {
		LengthM float64 `json:"length_m"`
	} `json:"path"`
	Clearance []struct {
		K        float64  `json:"k"`
		MinRatio *float64 `json:"min_ratio"`
	} `json:"clearance"`
	Raise struct {
		AM    *float64 `json:"a_m"`
		BM    *float64 `json:"b_m"`
		BothM *float64 `json:"both_m"`
	} `json:"raise"`
	Links struct {
		Self string `json:"self"`
		SVG  string `json:"svg"`
	} `json:"links"`
}

// client talks to the server as any caller would.
type client struct {
	address string
	http    http.Client
}

func newClient(address string) *client {
	return &client{address: address, http: http.Client{Timeout: 20 * time.Second}}
}

// mostAnswer bounds what is read of one answer.
const mostAnswer = 10 << 20

func (c *client) do(ctx context.Context, method, path string, body []byte) ([]byte, error) {
	request, err := http.NewRequestWithContext(ctx, method, c.address+path, bytes.NewReader(body)) //nolint:gosec // the address is the quickstart's own
	if err != nil {
		return nil, err
	}
	request.Header.Set("Content-Type", "application/json")
	response, err := c.http.Do(request) //nolint:gosec // as above
	if err != nil {
		return nil, err
	}
	defer response.Body.Close()
	got, err := io.ReadAll(io.LimitReader(response.Body, mostAnswer))
	if err == nil && response.StatusCode >= http.StatusBadRequest {
		err = fmt.Errorf("%s %s: %s: %s", method, path, response.Status, got)
	}
	return got, err
}

// awaitReady waits until the server can answer.
func (c *client) awaitReady(ctx context.Context) error {
	ctx, cancel := context.WithTimeout(ctx, 20*time.Second)
	defer cancel()
	for {
		_, err := c.do(ctx, http.MethodGet, "/readyz", nil)
		if err == nil {
			return nil
		}
		select {
		case <-ctx.Done():
			return fmt.Errorf("the server is not ready: %w", err)
		case <-time.After(50 * time.Millisecond):
		}
	}
}

// saveDrawing writes an assessment's drawing to a file.
func (c *client) saveDrawing(ctx context.Context, a answer, file string) error {
	picture, err := c.do(ctx, http.MethodGet, a.Links.SVG, nil)
	if err != nil {
		return err
	}
	return os.WriteFile(file, picture, 0o644)
}

// judge has one link judged.
func (c *client) judge(ctx context.Context, link any) (answer, error) {
	var got answer
	body, err := json.Marshal(link)
	if err != nil {
		return got, err
	}
	raw, err := c.do(ctx, http.MethodPost, "/v1/assessments", body)
	if err != nil {
		return got, err
	}
	return got, json.Unmarshal(raw, &got)
}
