package engine

import (
	"context"
	"encoding/binary"
	"errors"
	"fmt"
	"math"
	"reflect"
	"time"

	pdfium "github.com/klippa-app/go-pdfium"
)

// callable and memory are the parts of the sandbox's functions and memory that
// we use; go-pdfium's own interfaces for them live in an internal package.
type callable interface {
	CallWithStack(ctx context.Context, stack []uint64) error
}

type memory interface {
	Size() uint32
	Read(offset, byteCount uint32) ([]byte, bool)
	Write(offset uint32, v []byte) bool
}

// raw is one instance of the library in its sandbox. After the first failed
// call (a trap inside the sandbox) it is broken and only good for closing.
type raw struct {
	inst    pdfium.Pdfium
	lookup  func(name string) callable
	fn      map[string]callable
	mem     memory
	stack   [16]uint64
	scratch uint64 // address of scratchSize bytes for values that calls return
	pages   int    // loaded so far
	err     error
}

const scratchSize = 4096

// errTrap wraps what the sandbox said when a call failed.
var errTrap = errors.New("the PDF reader's sandbox stopped")

func newRaw(pool pdfium.Pool) (r *raw, err error) {
	inst, err := pool.GetInstance(30 * time.Second)
	if err != nil {
		return nil, fmt.Errorf("starting the PDF reader: %w", err)
	}
	defer func() {
		if p := recover(); p != nil {
			err = fmt.Errorf("go-pdfium's instance is not built as expected: %v", p)
		}
		if err != nil {
			_ = inst.Close()
		}
	}()
	// GetImplementation is go-pdfium's door to the instance; its type is
	// internal, so its exported members are reached by name.
	impl := reflect.ValueOf(inst.GetImplementation())
	module := impl.Elem().FieldByName("Module").Elem()
	mem, ok := module.MethodByName("Memory").Call(nil)[0].Interface().(memory)
	if !ok {
		return nil, errors.New("go-pdfium's memory is not built as expected")
	}
	find := impl.MethodByName("Fn")
	r = &raw{inst: inst, mem: mem, fn: map[string]callable{}}
	r.lookup = func(name string) callable {
		f, _ := find.Call([]reflect.Value{reflect.ValueOf(name)})[0].Interface().(callable)
		return f
	}
	r.scratch = r.malloc(scratchSize)
	if r.err != nil {
		return nil, r.err
	}
	return r, nil
}

func (r *raw) close() {
	defer func() { _ = recover() }() // closing a broken instance may panic; it is gone either way
	_ = r.inst.Close()
}

// call runs a function of the library and gives its result. Once a call has
// failed all further ones do nothing and give 0.
func (r *raw) call(name string, args ...uint64) (result uint64) {
	if r.err != nil {
		return 0
	}
	f, ok := r.fn[name]
	if !ok {
		f = r.lookup(name)
		r.fn[name] = f
	}
	return r.run(name, f, args...)
}

func (r *raw) run(name string, f callable, args ...uint64) (result uint64) {
	if r.err != nil {
		return 0
	}
	if f == nil {
		r.err = fmt.Errorf("%w: it has no function %s", errTrap, name)
		return 0
	}
	defer func() {
		if p := recover(); p != nil {
			r.err = fmt.Errorf("%w in %s: %v", errTrap, name, p)
			result = 0
		}
	}()
	copy(r.stack[:], args)
	if err := f.CallWithStack(context.Background(), r.stack[:]); err != nil {
		r.err = fmt.Errorf("%w in %s: %w", errTrap, name, err)
		return 0
	}
	return r.stack[0]
}

func (r *raw) int(name string, args ...uint64) int { return int(int32(r.call(name, args...))) }

func (r *raw) malloc(n int) uint64 {
	p := r.call("malloc", uint64(n))
	if p == 0 && r.err == nil {
		r.err = fmt.Errorf("%w: no memory for %d bytes", errTrap, n)
	}
	return p
}

func (r *raw) free(p uint64) {
	if p != 0 {
		r.call("free", p)
	}
}

// bytes is a view of the sandbox's memory, valid until the next call.
func (r *raw) bytes(p uint64, n int) []byte {
	if r.err != nil {
		return make([]byte, min(n, scratchSize))
	}
	b, ok := r.mem.Read(uint32(p), uint32(n))
	if !ok {
		r.err = fmt.Errorf("%w: address outside its memory", errTrap)
		return make([]byte, min(n, scratchSize))
	}
	return b
}

func (r *raw) write(p uint64, b []byte) {
	if r.err == nil && !r.mem.Write(uint32(p), b) {
		r.err = fmt.Errorf("%w: address outside its memory", errTrap)
	}
}

func float32At(b []byte, i int) float64 {
	return float64(math.Float32frombits(binary.LittleEndian.Uint32(b[4*i:])))
}

func float64At(b []byte, i int) float64 {
	return math.Float64frombits(binary.LittleEndian.Uint64(b[8*i:]))
}
