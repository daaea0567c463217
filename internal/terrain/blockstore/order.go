package blockstore

import (
	"container/list"
	"slices"
	"time"
)

// entry is a file that is known of.
type entry struct {
	name    key
	bytes   int64     // of the file, header included
	used    time.Time // last put or got
	touched time.Time // as its file says: never later than used
}

// order is the files that are known of, the last used first. The Store's mutex
// guards it.
type order struct {
	byName map[key]*list.Element // of *entry
	recent *list.List
	bytes  int64
}

func newOrder() *order { return &order{byName: map[key]*list.Element{}, recent: list.New()} }

// find returns the entry, or nil.
func (o *order) find(name key) *entry {
	if at, ok := o.byName[name]; ok {
		return at.Value.(*entry)
	}
	return nil
}

// first puts an entry in front, in place of the one of its name.
func (o *order) first(e *entry) {
	o.drop(e.name)
	o.byName[e.name] = o.recent.PushFront(e)
	o.bytes += e.bytes
}

func (o *order) drop(name key) {
	at, ok := o.byName[name]
	if !ok {
		return
	}
	o.bytes -= at.Value.(*entry).bytes
	o.recent.Remove(at)
	delete(o.byName, name)
}

// last returns the entry that was not used for longest, other than that of
// name, or nil.
func (o *order) last(except key) *entry {
	at := o.recent.Back()
	if at != nil && at.Value.(*entry).name == except {
		at = at.Prev()
	}
	if at == nil {
		return nil
	}
	return at.Value.(*entry)
}

// sorted makes an order of entries by the time of their last use.
func sorted(entries []*entry) *order {
	slices.SortStableFunc(entries, func(a, b *entry) int { return a.used.Compare(b.used) })
	o := newOrder()
	for _, e := range entries {
		o.first(e)
	}
	return o
}
