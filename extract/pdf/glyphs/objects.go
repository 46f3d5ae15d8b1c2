package glyphs

import (
	"bytes"
	"io"
	"reflect"

	lib "github.com/ledongthuc/pdf"
)

// file gives the library the content of a paper and counts what it reads:
// whatever loops in the library must come through here, again and again.
type file struct {
	content []byte
	fuel    *fuel
}

// ReadAt implements io.ReaderAt. It panics when the fuel is used up.
func (f *file) ReadAt(p []byte, off int64) (int, error) {
	burn(&f.fuel.read, len(p)+256, fuelRead, "reads of the file")
	if off < 0 || off >= int64(len(f.content)) {
		return 0, io.EOF
	}
	n := copy(p, f.content[off:])
	if n < len(p) {
		return n, io.EOF
	}
	return n, nil
}

// ref is the number of an indirect object; 0 for a direct one.
type ref uint32

// refOf gives the number of the object that v is, or is a part of. The library
// keeps it to itself, but without it nothing could be cached.
func refOf(v lib.Value) ref {
	return ref(reflect.ValueOf(v).FieldByName("ptr").Field(0).Uint())
}

// children gives the numbers of the indirect objects in a dictionary by key;
// direct entries give 0.
func children(v lib.Value) map[string]ref {
	if v.Kind() != lib.Dict && v.Kind() != lib.Stream {
		return nil
	}
	d := reflect.ValueOf(v).FieldByName("data").Elem()
	if v.Kind() == lib.Stream {
		d = d.FieldByName("hdr")
	}
	out := make(map[string]ref, d.Len())
	for it := d.MapRange(); it.Next(); {
		r := ref(0)
		if e := it.Value().Elem(); e.IsValid() && e.Type().Name() == "objptr" {
			r = ref(e.Field(0).Uint())
		}
		out[it.Key().String()] = r
	}
	return out
}

// dict is a dictionary whose entries are looked up once.
type dict struct {
	doc  *Document
	v    lib.Value
	refs map[string]ref
	got  map[string]lib.Value
	subs map[string]*dict
}

func (d *Document) dict(v lib.Value) *dict {
	return &dict{doc: d, v: v, refs: children(v), got: map[string]lib.Value{}, subs: map[string]*dict{}}
}

func (d *dict) key(name string) lib.Value {
	if d == nil {
		return lib.Value{}
	}
	if _, there := d.refs[name]; !there {
		return lib.Value{}
	}
	v, ok := d.got[name]
	if !ok {
		v = d.doc.key(d.v, name)
		d.got[name] = v
	}
	return v
}

// sub gives an entry that is a dictionary itself; nil if it is none.
func (d *dict) sub(name string) *dict {
	if d == nil {
		return nil
	}
	s, ok := d.subs[name]
	if !ok {
		s = d.doc.resources(d.key(name))
		d.subs[name] = s
	}
	return s
}

// key looks up one entry of a dictionary and counts it.
func (d *Document) key(v lib.Value, name string) lib.Value {
	burn(&d.fuel.objects, 1, fuelObjects, "objects")
	return v.Key(name)
}

// stream gives the inflated bytes of a stream. A stream that breaks off gives
// what came before, as viewers do, and short is set.
func (d *Document) stream(v lib.Value) (b []byte, short bool) {
	burn(&d.fuel.objects, 1, fuelObjects, "objects")
	if v.Kind() != lib.Stream {
		return nil, true
	}
	var buf bytes.Buffer
	limit := min(maxStream, fuelInflated-d.fuel.inflated)
	n, err := io.Copy(&buf, io.LimitReader(v.Reader(), limit))
	burn(&d.fuel.inflated, int(n)+1, fuelInflated, "inflated bytes")
	if n == limit {
		panic(&Error{What: "a stream that inflates without end", Err: ErrFuel})
	}
	return buf.Bytes(), err != nil && err != io.EOF
}
