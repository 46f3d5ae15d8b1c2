package engine

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"runtime"
	"runtime/debug"
	"strings"
	"sync"

	pdfium "github.com/klippa-app/go-pdfium"
	"github.com/klippa-app/go-pdfium/webassembly"
	"github.com/tetratelabs/wazero"
	"github.com/tetratelabs/wazero/api"
	"github.com/tetratelabs/wazero/experimental"
)

// memoryPages is the sandbox's memory limit in pages of 64 KiB: 320 MiB, so
// that a worker that holds it stays below its own limit.
const memoryPages = 320 * 16

// Engine is the compiled library; instances of it are cheap. One per process
// is enough: see [Shared]. It may be used from several goroutines.
type Engine struct {
	pool  pdfium.Pool
	cache wazero.CompilationCache

	mu   sync.Mutex
	idle []*raw // sound instances that wait for another document
}

// instance gives an instance of the library: a kept one, for a new one costs
// as much as a page.
func (e *Engine) instance() (*raw, error) {
	e.mu.Lock()
	defer e.mu.Unlock()
	if n := len(e.idle); n > 0 {
		r := e.idle[n-1]
		e.idle = e.idle[:n-1]
		return r, nil
	}
	return newRaw(e.pool)
}

// release takes an instance back. One that failed, or that has read enough
// pages, is thrown away: its memory never shrinks.
func (e *Engine) release(r *raw) {
	e.mu.Lock()
	defer e.mu.Unlock()
	if r.err != nil || r.pages >= pagesPerInstance || len(e.idle) >= maxIdle {
		r.close()
		return
	}
	e.idle = append(e.idle, r)
}

const (
	pagesPerInstance = 200
	maxIdle          = 2
)

// Config says how an Engine starts.
type Config struct {
	// CacheDir keeps the compiled library between runs; empty: it is compiled
	// anew each time (about 5 s).
	CacheDir string
	// Cold, where not nil, is called before the library is compiled for the
	// first time, which takes some seconds.
	Cold func()
}

// DefaultCacheDir is the folder for the compiled library in the user's cache
// folder, or "" where there is none.
func DefaultCacheDir() string {
	dir, err := os.UserCacheDir()
	if err != nil {
		return ""
	}
	return filepath.Join(dir, "halfspan")
}

// New compiles the library, or loads it compiled from the cache.
func New(cfg Config) (*Engine, error) {
	run := wazero.NewRuntimeConfig().
		WithCoreFeatures(api.CoreFeaturesV2 | experimental.CoreFeaturesExceptionHandling).
		WithMemoryLimitPages(memoryPages)
	cache, warm := openCache(cfg.CacheDir)
	if cache != nil {
		run = run.WithCompilationCache(cache)
	}
	if !warm && cfg.Cold != nil {
		cfg.Cold()
	}
	pool, err := webassembly.Init(webassembly.Config{
		MinIdle: 0, MaxIdle: 1, MaxTotal: 64,
		FSConfig:      wazero.NewFSConfig(), // no file system at all
		RuntimeConfig: run,
		Stdout:        io.Discard, Stderr: io.Discard,
	})
	if err != nil {
		return nil, fmt.Errorf("starting the PDF reader: %w", err)
	}
	if cache != nil && !warm {
		// Without the mark the next start only announces itself once more.
		_ = os.WriteFile(readyMark(cfg.CacheDir), nil, 0o600)
	}
	return &Engine{pool: pool, cache: cache}, nil
}

// openCache opens the compilation cache; warm says whether it holds what this
// build of the program needs. A folder that cannot be used costs time, not the
// run.
func openCache(dir string) (cache wazero.CompilationCache, warm bool) {
	if dir == "" {
		return nil, false
	}
	if err := os.MkdirAll(dir, 0o700); err != nil {
		return nil, false
	}
	kept, _ := filepath.Glob(filepath.Join(dir, "wazero-*", "*"))
	_, err := os.Stat(readyMark(dir))
	cache, cacheErr := wazero.NewCompilationCacheWithDir(dir)
	if cacheErr != nil {
		return nil, false
	}
	return cache, err == nil && len(kept) > 0
}

// readyMark is a file that says that the cache was filled by a program built
// with the same versions of library and sandbox: others compile anew.
func readyMark(dir string) string {
	name := "ready-" + runtime.GOOS + "-" + runtime.GOARCH
	if info, ok := debug.ReadBuildInfo(); ok {
		for _, d := range info.Deps {
			if strings.HasSuffix(d.Path, "/wazero") || strings.HasSuffix(d.Path, "/go-pdfium") {
				name += "-" + d.Version
			}
		}
	}
	return filepath.Join(dir, name)
}

// Close frees the compiled library.
func (e *Engine) Close() error {
	e.mu.Lock()
	for _, r := range e.idle {
		r.close()
	}
	e.idle = nil
	e.mu.Unlock()
	err := e.pool.Close()
	if e.cache != nil {
		err = errors.Join(err, e.cache.Close(context.Background()))
	}
	return err
}

// Shared gives the process's one engine and starts it at the first call, with
// the default cache folder. cold is only heard by the call that starts it.
func Shared(cold func()) (*Engine, error) {
	shared.once.Do(func() {
		shared.engine, shared.err = New(Config{CacheDir: DefaultCacheDir(), Cold: cold})
	})
	return shared.engine, shared.err
}

// shared is set once and never changed: compiling the library twice in one
// process would cost a tenth of a second a paper.
var shared struct {
	once   sync.Once
	engine *Engine
	err    error
}
