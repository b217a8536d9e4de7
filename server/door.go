package server

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"google.golang.org/protobuf/proto"
	"google.golang.org/protobuf/reflect/protoreflect"

	pb "meniscus.example/proto/meniscus/v1"
)

// longest is the greatest length of a text field, in bytes.
const longest = 200

// mostItems is the greatest number of items of a repeated field of a unary request.
const mostItems = 100

// door checks every value of a request against the schema: numbers against the limits of their quantity, enums against
// their values, texts and lists against a greatest length. It is the same code for every message.
type door struct {
	plans map[protoreflect.FullName]*plan
}

// plan is what to check of one message: its fields, in the order of the schema.
type plan struct {
	fields []check
}

type check struct {
	field    protoreflect.FieldDescriptor
	name     string
	quantity *pb.Quantity // of a number
	min, max float64
	message  *plan // of a message
}

// newDoor makes the plans of the given messages and of all that they hold.
func newDoor(messages ...protoreflect.MessageDescriptor) *door {
	d := &door{plans: map[protoreflect.FullName]*plan{}}
	for _, m := range messages {
		d.plan(m)
	}
	return d
}

func (d *door) plan(m protoreflect.MessageDescriptor) *plan {
	if p := d.plans[m.FullName()]; p != nil {
		return p
	}
	p := &plan{}
	d.plans[m.FullName()] = p
	for i := range m.Fields().Len() {
		f := m.Fields().Get(i)
		c := check{field: f, name: string(f.Name())}
		switch f.Kind() {
		case protoreflect.MessageKind:
			c.message = d.plan(f.Message())
		case protoreflect.BoolKind:
			continue
		default:
			if q, ok := proto.GetExtension(f.Options(), pb.E_Quantity).(*pb.Quantity); ok && q.HasMinimum() {
				c.quantity, c.min, c.max = q, q.GetMinimum(), q.GetMaximum()
			}
		}
		p.fields = append(p.fields, c)
	}
	return p
}

// check adds to v what is wrong with m, whose path is at (empty for a request).
func (d *door) check(v *violations, m proto.Message) {
	r := m.ProtoReflect()
	if p := d.plans[r.Descriptor().FullName()]; p != nil {
		p.check(v, r, nil)
	}
}

// path is where a message stands: the path of the message that holds it, and its own name there.
type path struct {
	parent *path
	name   string
	index  int // in a list; -1 elsewhere
}

func (at *path) String() string {
	if at == nil {
		return ""
	}
	s := at.name
	if at.index >= 0 {
		s += "[" + strconv.Itoa(at.index) + "]"
	}
	if at.parent != nil {
		s = at.parent.String() + "." + s
	}
	return s
}

func (p *plan) check(v *violations, r protoreflect.Message, at *path) {
	for i := range p.fields {
		c := &p.fields[i]
		if !r.Has(c.field) {
			continue
		}
		value := r.Get(c.field)
		if !c.field.IsList() {
			if c.message != nil {
				c.message.check(v, value.Message(), &path{at, c.name, -1})
				continue
			}
			c.value(v, value, at, -1)
			continue
		}
		list := value.List()
		if list.Len() > mostItems {
			v.add((&path{at, c.name, -1}).String(), fmt.Sprintf("has %d items, more than %d", list.Len(), mostItems), "")
			continue
		}
		for i := range list.Len() {
			if c.message != nil {
				c.message.check(v, list.Get(i).Message(), &path{at, c.name, i})
				continue
			}
			c.value(v, list.Get(i), at, i)
		}
	}
}

// value checks one number, enum or text.
func (c *check) value(v *violations, value protoreflect.Value, at *path, index int) {
	fault := func(problem, looksLike string) {
		v.add((&path{at, c.name, index}).String(), problem, looksLike)
	}
	switch c.field.Kind() {
	case protoreflect.DoubleKind:
		if x := value.Float(); c.quantity != nil && !(x >= c.min && x <= c.max) {
			fault(c.outside(x))
		}
	case protoreflect.Int32Kind, protoreflect.Int64Kind:
		if x := float64(value.Int()); c.quantity != nil && !(x >= c.min && x <= c.max) {
			fault(c.outside(x))
		}
	case protoreflect.EnumKind:
		values := c.field.Enum().Values()
		if values.ByNumber(value.Enum()) == nil {
			var known []string
			for i := 1; i < values.Len(); i++ {
				known = append(known, string(values.Get(i).Name()))
			}
			fault(fmt.Sprintf("is %d, not a value of %s; it has %s", value.Enum(), c.field.Enum().Name(), strings.Join(known, ", ")), "")
		}
	case protoreflect.StringKind:
		if n := len(value.String()); n > longest {
			fault(fmt.Sprintf("is %d bytes long, more than %d", n, longest), "")
		}
	}
}

// outside says what is wrong with a number that is not within the limits, and what it looks like.
func (c *check) outside(x float64) (problem, looksLike string) {
	switch {
	case math.IsNaN(x):
		return "is not a number", ""
	case math.IsInf(x, 0):
		return "is infinite", ""
	}
	unit := symbol(c.quantity.GetUnit())
	problem = fmt.Sprintf("is %v%s, outside [%v, %v]%s", x, unit, c.min, c.max, unit)
	for _, l := range c.quantity.GetLookalikes() {
		if x >= l.GetMinimum() && x <= l.GetMaximum() {
			return problem, l.GetLooksLike()
		}
	}
	return problem, ""
}

// symbol is the customary symbol of a UCUM code, with the space before it.
func symbol(ucum string) string {
	switch ucum {
	case "1":
		return ""
	case "[diop]":
		return " D"
	case "[p'diop]":
		return " prism dioptres"
	case "deg":
		return "°"
	case "um":
		return " µm"
	}
	return " " + ucum
}
