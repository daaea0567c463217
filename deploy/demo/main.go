// Command demo shows the service on an invented island: it writes the island's
// terrain, has a running server judge three links on it, and prints what came
// back. deploy/quickstart runs it.
package main

import (
	"context"
	"fmt"
	"os"
	"os/signal"

	"ridgehop/internal/island"
)

func main() {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt)
	defer stop()
	if err := run(ctx, os.Args[1:]); err != nil {
		fmt.Fprintln(os.Stderr, "demo:", err)
		os.Exit(1)
	}
}

func run(ctx context.Context, args []string) error {
	switch {
	case len(args) == 2 && args[0] == "terrain":
		if err := os.MkdirAll(args[1], 0o755); err != nil {
			return err
		}
		_, err := island.Write(args[1])
		return err
	case len(args) == 3 && args[0] == "judge":
		return judgeAll(ctx, newClient(args[1]), args[2], os.Stdout)
	}
	return fmt.Errorf("usage: demo terrain FOLDER | demo judge ADDRESS FOLDER")
}
