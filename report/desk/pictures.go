package desk

import (
	"container/list"
	"context"
	"sync"
)

// pictureBytes bounds the pictures kept in memory: some hundred pages.
const pictureBytes = 48 << 20

type pictureKey struct {
	sha   string
	page  int
	width int
}

type picture struct {
	key   pictureKey
	ready chan struct{} // closed when png and err are set
	png   []byte
	err   error
}

// pictures keeps the pages drawn last, so that going back and forth costs
// nothing, and draws each page once however many ask for it.
type pictures struct {
	draw  func(ctx context.Context, key pictureKey) ([]byte, error)
	limit int

	mu   sync.Mutex
	byID map[pictureKey]*list.Element
	used *list.List // of *picture, the latest in front
	size int
}

func newPictures(limit int, draw func(context.Context, pictureKey) ([]byte, error)) *pictures {
	return &pictures{draw: draw, limit: limit, byID: map[pictureKey]*list.Element{}, used: list.New()}
}

// get gives the picture of one page, drawn now if need be. A drawing that was
// begun is finished even when the one who asked goes away: the page will be
// wanted again.
func (c *pictures) get(ctx context.Context, key pictureKey) ([]byte, error) {
	c.mu.Lock()
	e, ok := c.byID[key]
	if ok {
		c.used.MoveToFront(e)
	} else {
		e = c.used.PushFront(&picture{key: key, ready: make(chan struct{})})
		c.byID[key] = e
		go c.fill(context.WithoutCancel(ctx), e)
	}
	p := e.Value.(*picture)
	c.mu.Unlock()
	select {
	case <-p.ready:
		return p.png, p.err
	case <-ctx.Done():
		return nil, ctx.Err()
	}
}

func (c *pictures) fill(ctx context.Context, e *list.Element) {
	p := e.Value.(*picture)
	p.png, p.err = c.draw(ctx, p.key)
	close(p.ready)
	c.mu.Lock()
	defer c.mu.Unlock()
	if p.err != nil { // not kept: the next one who asks tries again
		c.drop(e)
		return
	}
	c.size += len(p.png)
	for c.size > c.limit {
		last := c.used.Back()
		if last == nil || last == e {
			break
		}
		old := last.Value.(*picture)
		select {
		case <-old.ready:
			c.size -= len(old.png)
			c.drop(last)
		default: // still being drawn
			return
		}
	}
}

func (c *pictures) drop(e *list.Element) {
	c.used.Remove(e)
	delete(c.byID, e.Value.(*picture).key)
}
