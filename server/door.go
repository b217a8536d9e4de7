package server

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"

	"google.golang.org/protobuf/proto"
	"google.golang.org/protobuf/reflect/protoreflect"

	pb "meniscus.example/proto/meniscus/v1"
)

// longest is the greatest length of a text field, in characters, whatever their script.
const longest = 200

// mostItems is the greatest number of items of a repeated field of a unary request.
const mostItems = 100

// door checks every value of a request against the schema: numbers against the limits of their quantity, enums against
// their values, texts and lists against a greatest length. It is the same code for every message.
type door struct {
	plans map[protoreflect.FullName]*plan
}

// plan is what to check of one message: its fields, in the order of the schema, which is that of their descriptors' indices.
type plan struct {
	fields []check
}

type check struct {
	field    protoreflect.FieldDescriptor
	kind     protoreflect.Kind
	list     bool
	name     string
	quantity *pb.Quantity // of a number
	min, max float64
	enum     []protoreflect.EnumNumber // of an enum: its values
	message  *plan                     // of a message
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
		c := check{field: f, kind: f.Kind(), list: f.IsList(), name: string(f.Name())}
		switch f.Kind() {
		case protoreflect.MessageKind:
			c.message = d.plan(f.Message())
		case protoreflect.BoolKind:
		case protoreflect.EnumKind:
			for j := range f.Enum().Values().Len() {
				c.enum = append(c.enum, f.Enum().Values().Get(j).Number())
			}
		default:
			if q, ok := proto.GetExtension(f.Options(), pb.E_Quantity).(*pb.Quantity); ok && q.HasMinimum() {
				c.quantity, c.min, c.max = q, q.GetMinimum(), q.GetMaximum()
			}
		}
		p.fields = append(p.fields, c)
	}
	return p
}

// check adds to v what is wrong with the request m. A quick look, made from the same schema, spares the most of them the plan.
func (d *door) check(v *violations, m proto.Message) {
	if looksFine(m) {
		return
	}
	r := m.ProtoReflect()
	if p := d.plans[r.Descriptor().FullName()]; p != nil {
		p.check(v, r)
	}
}

// check adds what is wrong with a message. The paths of the faults begin in it; whoever holds it puts its name before them.
func (p *plan) check(v *violations, r protoreflect.Message) {
	for i := range p.fields {
		c := &p.fields[i]
		switch {
		case c.list:
		case c.message != nil:
			// Of a message that is not there Get gives one that is not valid: cheaper than to ask first.
			if m := r.Get(c.field); m.Message().IsValid() {
				c.one(v, m, "")
			}
			continue
		default:
			if r.Has(c.field) {
				c.one(v, r.Get(c.field), "")
			}
			continue
		}
		list := r.Get(c.field).List()
		if list.Len() > mostItems {
			v.add(c.name, fmt.Sprintf("has %d items, more than %d", list.Len(), mostItems), "")
			continue
		}
		for i := range list.Len() {
			known := len(v.list)
			if c.one(v, list.Get(i), ""); len(v.list) > known {
				// Only now is it worth to say which one.
				v.list = v.list[:known]
				c.one(v, list.Get(i), "["+strconv.Itoa(i)+"]")
			}
		}
	}
}

// one checks one value of a field; index is its place in a list, or empty.
func (c *check) one(v *violations, value protoreflect.Value, index string) {
	if c.message == nil {
		if problem, looksLike := c.problem(value); problem != "" {
			v.add(c.name+index, problem, looksLike)
		}
		return
	}
	known := len(v.list)
	c.message.check(v, value.Message())
	for i := known; i < len(v.list); i++ {
		v.list[i].Field = c.name + index + "." + v.list[i].Field
	}
}

// problem says what is wrong with a number, an enum or a text, and what it looks like; both are empty where nothing is.
func (c *check) problem(value protoreflect.Value) (problem, looksLike string) {
	switch c.kind {
	case protoreflect.DoubleKind:
		if x := value.Float(); c.quantity != nil && !(x >= c.min && x <= c.max) {
			return c.outside(x)
		}
	case protoreflect.Int32Kind, protoreflect.Int64Kind:
		if x := float64(value.Int()); c.quantity != nil && !(x >= c.min && x <= c.max) {
			return c.outside(x)
		}
	case protoreflect.EnumKind:
		if !slices.Contains(c.enum, value.Enum()) {
			values := c.field.Enum().Values()
			var known []string
			for i := 1; i < values.Len(); i++ {
				known = append(known, string(values.Get(i).Name()))
			}
			return fmt.Sprintf("is %d, not a value of %s; it has %s", value.Enum(), c.field.Enum().Name(), strings.Join(known, ", ")), ""
		}
	case protoreflect.StringKind:
		if n := utf8.RuneCountInString(value.String()); n > longest {
			return fmt.Sprintf("has %d characters, more than %d", n, longest), ""
		}
	}
	return "", ""
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
