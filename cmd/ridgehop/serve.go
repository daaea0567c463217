package main

import (
	"context"
	"errors"
	"fmt"
	"log/slog"
	"net"
	"net/http"
	"os"
	"os/signal"
	"syscall"
	"time"

	"ridgehop/api"
	"ridgehop/internal/assess"
	"ridgehop/internal/config"
	"ridgehop/internal/screening/sites"
	"ridgehop/internal/store"
	"ridgehop/internal/telemetry"
)

// serveCommand runs the service until it is told to stop.
type serveCommand struct {
	terrainFlags     `embed:""`
	config.Equipment `embed:""`
	config.Service   `embed:""`
}

// Validate checks the flags of both groups.
func (c *serveCommand) Validate() error {
	return errors.Join(c.terrainFlags.Validate(), c.Service.Validate())
}

// shutdownTime is how long requests under way may take to finish.
const shutdownTime = 10 * time.Second

// Run serves.
func (c *serveCommand) Run(ctx context.Context, s streams) error {
	log := telemetry.NewLogger(s.err, c.LogLevel, c.LogJSON)
	kept, err := store.Open(ctx, c.Data)
	if err != nil {
		return fmt.Errorf("--data %s: %w", c.Data, err)
	}
	defer func() { _ = kept.Close() }()
	loaded, err := loadTerrain(ctx, c.terrainFlags, c.Data, log)
	if err != nil {
		return err
	}
	defer loaded.Close()
	equipment, err := equip(c.Equipment, shelf{kept})
	if err != nil {
		return err
	}
	contract, err := api.NewContract()
	if err != nil {
		return err
	}
	health := telemetry.NewHealth(storeCheck(kept), terrainCheck(loaded))
	handler, err := api.NewHandler(contract, api.Dependencies{
		Assessor: assess.NewService(loaded).WithEquipment(equipment), Keeper: kept, Lister: loaded, Elevation: loaded,
		Antennas: equipment.Antennas, Radios: equipment.Radios, Sites: sites.NewRegister(shelf{kept}),
		Health: health, Metrics: telemetry.NewMetrics(), Log: log, MostAtOnce: c.MostAtOnce,
	})
	if err != nil {
		return err
	}
	listener, err := (&net.ListenConfig{}).Listen(ctx, "tcp", c.Listen)
	if err != nil {
		return inputError{fmt.Errorf("--listen %s: %w", c.Listen, err)}
	}
	stop := reloadOnHangup(ctx, loaded, log)
	defer stop()
	log.Info("serving", "address", "http://"+listener.Addr().String(), "rasters", loaded.Usable(), "data", c.Data, "version", programVersion())
	return serve(ctx, handler, listener, health)
}

// serve answers requests until ctx ends, then lets those under way finish.
func serve(ctx context.Context, handler http.Handler, listener net.Listener, health *telemetry.Health) error {
	server := &http.Server{
		Handler:           handler,
		ReadHeaderTimeout: 5 * time.Second,
		ReadTimeout:       10 * time.Second,
		WriteTimeout:      60 * time.Second,
		IdleTimeout:       60 * time.Second,
		MaxHeaderBytes:    16 << 10,
	}
	failed := make(chan error, 1)
	go func() { failed <- server.Serve(listener) }()
	select {
	case err := <-failed:
		return err
	case <-ctx.Done():
	}
	health.Drain()
	deadline, cancel := context.WithTimeout(context.WithoutCancel(ctx), shutdownTime)
	defer cancel()
	return server.Shutdown(deadline)
}

// reloadOnHangup loads the rasters anew whenever the process gets SIGHUP, until
// stop is called.
func reloadOnHangup(ctx context.Context, loaded *loadedTerrain, log *slog.Logger) (stop func()) {
	hangups := make(chan os.Signal, 1)
	signal.Notify(hangups, syscall.SIGHUP)
	ctx, cancel := context.WithCancel(ctx)
	ended := make(chan struct{})
	go func() {
		defer close(ended)
		for {
			select {
			case <-ctx.Done():
				return
			case <-hangups:
				changes, err := loaded.Reload(ctx)
				if err != nil {
					log.Error("rasters not reloaded", "reason", err)
					continue
				}
				log.Info("rasters reloaded", "added", len(changes.Added), "removed", len(changes.Removed), "changed", len(changes.Changed), "usable", loaded.Usable())
			}
		}
	}()
	return func() {
		signal.Stop(hangups)
		cancel()
		<-ended
	}
}

func storeCheck(kept *store.Store) telemetry.Check {
	return telemetry.Check{Name: "store", Run: func(ctx context.Context) (string, error) {
		return "answers", kept.Ping(ctx)
	}}
}

func terrainCheck(loaded *loadedTerrain) telemetry.Check {
	return telemetry.Check{Name: "rasters", Run: func(context.Context) (string, error) {
		return fmt.Sprintf("%d usable", loaded.Usable()), nil
	}}
}
