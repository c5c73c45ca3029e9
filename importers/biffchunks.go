package importers

import "unicode/utf16"

// chunks reads a record and its continuations as one run of bytes; a text that crosses a border starts again there
// with a byte that says how wide its letters are ([MS-XLS] 2.5.293).
type chunks struct {
	now   []byte
	rest  [][]byte
	short bool // more was asked for than is there
}

func newChunks(r record) *chunks { return &chunks{now: r.data, rest: r.cont} }

func (c *chunks) more() bool {
	for len(c.now) == 0 {
		if len(c.rest) == 0 {
			c.short = true
			return false
		}
		c.now, c.rest = c.rest[0], c.rest[1:]
	}
	return true
}

func (c *chunks) u8() int {
	if !c.more() {
		return 0
	}
	v := c.now[0]
	c.now = c.now[1:]
	return int(v)
}

func (c *chunks) u16() int { return c.u8() | c.u8()<<8 }

func (c *chunks) skip(n int) {
	for n > 0 && c.more() {
		k := min(n, len(c.now))
		c.now = c.now[k:]
		n -= k
	}
}

// text reads n letters behind their flag byte.
func (c *chunks) text(n int) string {
	wide := c.u8()&1 != 0
	return c.letters(n, wide)
}

func (c *chunks) letters(n int, wide bool) string {
	units := make([]uint16, 0, min(n, 1<<15))
	for len(units) < n {
		if len(c.now) == 0 {
			if !c.more() {
				break
			}
			wide = c.u8()&1 != 0
			if !c.more() {
				break
			}
		}
		if wide {
			units = append(units, uint16(c.u16()))
		} else {
			units = append(units, uint16(c.u8()))
		}
	}
	return string(utf16.Decode(units))
}

// rich reads a text of the shared table with its runs and phonetic part, which are passed over.
func (c *chunks) rich() string {
	n := c.u16()
	flags := c.u8()
	runs, ext := 0, 0
	if flags&8 != 0 {
		runs = c.u16()
	}
	if flags&4 != 0 {
		ext = c.u16() | c.u16()<<16
	}
	s := c.letters(n, flags&1 != 0)
	c.skip(4*runs + max(ext, 0))
	return s
}
