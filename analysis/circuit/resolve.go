package circuit

import (
	"strings"

	"triodeck/parser"
)

// Target is what a hierarchical name stands for.
type Target struct {
	Path     []*Instance // from the cell where the name was looked up, outermost first
	Cell     *Cell       // where the thing itself is
	Net      NetID       // of ResolveNet
	Device   *Device     // of ResolveDevice
	Instance *Instance   // of ResolveInstance
}

// NetByName gives the net of a folded name.
func (c *Cell) NetByName(folded string) (NetID, bool) {
	id, ok := c.nets[folded]
	return id, ok
}

// DeviceByName gives the device of a folded name, the first of several; nil if
// there is none.
func (c *Cell) DeviceByName(folded string) *Device {
	c.index.Do(c.makeIndex)
	return c.devices[folded]
}

// InstanceByName gives the instance of a folded name, likewise.
func (c *Cell) InstanceByName(folded string) *Instance {
	c.index.Do(c.makeIndex)
	return c.instances[folded]
}

func (c *Cell) makeIndex() {
	c.devices = make(map[string]*Device, len(c.Devices))
	for _, d := range c.Devices {
		if c.devices[d.Name] == nil {
			c.devices[d.Name] = d
		}
	}
	c.instances = make(map[string]*Instance, len(c.Instances))
	for _, x := range c.Instances {
		if c.instances[x.Name] == nil {
			c.instances[x.Name] = x
		}
	}
}

// ResolveNet finds the net of a name such as `x1.xsw.mid`, in any case.
func (c *Cell) ResolveNet(path string) (Target, bool) {
	return c.resolve(path, func(c *Cell, name string, t *Target) (ok bool) {
		t.Net, ok = c.NetByName(name)
		return ok
	})
}

// ResolveDevice finds the device of a name such as `x1.xsw.m3`.
func (c *Cell) ResolveDevice(path string) (Target, bool) {
	return c.resolve(path, func(c *Cell, name string, t *Target) bool {
		t.Device = c.DeviceByName(name)
		return t.Device != nil
	})
}

// ResolveInstance finds the instance of a name such as `x1.xsw`.
func (c *Cell) ResolveInstance(path string) (Target, bool) {
	return c.resolve(path, func(c *Cell, name string, t *Target) bool {
		t.Instance = c.InstanceByName(name)
		return t.Instance != nil
	})
}

// search is a hierarchical name being looked up.
type search struct {
	find  func(*Cell, string, *Target) bool
	tries int
}

// maxTries ends a search through names made to be ambiguous at every dot.
const maxTries = 4096

func (c *Cell) resolve(path string, find func(*Cell, string, *Target) bool) (Target, bool) {
	s := search{find: find}
	return s.in(c, parser.Fold(path), nil)
}

// in tries the whole name in a cell, then each beginning of it as an instance:
// names hold dots themselves.
func (s *search) in(c *Cell, name string, path []*Instance) (Target, bool) {
	t := Target{Cell: c, Path: path}
	if s.find(c, name, &t) {
		return t, true
	}
	for at := 0; s.tries < maxTries; at++ {
		dot := strings.IndexByte(name[at:], '.')
		if dot < 0 {
			break
		}
		at += dot
		s.tries++
		if x := c.InstanceByName(name[:at]); x != nil && x.Cell != nil {
			inner := append(path[:len(path):len(path)], x)
			if t, ok := s.in(x.Cell, name[at+1:], inner); ok {
				return t, true
			}
		}
	}
	return Target{}, false
}
