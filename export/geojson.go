package export

import (
	"bufio"
	"encoding/json"
	"io"

	"boughwork/geom"
	"boughwork/ground/layout"
)

// number is a JSON number with a fixed count of decimals.
func number(v float64, decimals int) json.Number { return json.Number(decimal(v, decimals)) }

// position is longitude, latitude and perhaps height; in a site that came in metres x, y and perhaps z.
type position []json.Number

// placer turns local metres into positions.
type placer struct {
	geographic bool
	frame      geom.Frame
}

func newPlacer(rec *layout.Record) placer {
	o := rec.Frame.OriginLonLat
	if o == nil {
		return placer{}
	}
	return placer{true, geom.Frame{Geographic: true, Lon: o[0], Lat: o[1]}}
}

// plan returns a place in local metres in the coordinates of the file. A longitude is not brought into -180 to 180 but
// continues that of the origin, so that what lies across the antimeridian can be cut there.
func (p placer) plan(x, y float64) (lon, lat float64) {
	if !p.geographic {
		return x, y
	}
	lon, lat = p.frame.ToLonLat(x, y)
	switch {
	case lon-p.frame.Lon > 180:
		lon -= 360
	case lon-p.frame.Lon < -180:
		lon += 360
	}
	return lon, lat
}

// position writes a place down; z is left out if flat.
func (p placer) position(v geom.Vec, flat bool) position {
	decimals := degreeDecimals
	if !p.geographic {
		decimals = lengthDecimals
	}
	out := position{number(v.X, decimals), number(v.Y, decimals)}
	if !flat {
		out = append(out, number(v.Z, lengthDecimals))
	}
	return out
}

// feature is a GeoJSON feature; properties keep the order of a struct.
type feature struct {
	Type       string   `json:"type"`
	ID         string   `json:"id,omitempty"`
	Properties any      `json:"properties"`
	Geometry   geometry `json:"geometry"`
}

type geometry struct {
	Type        string `json:"type"`
	Coordinates any    `json:"coordinates"`
}

// collection is the head of the file; its features follow one a line.
type collection struct {
	Type string `json:"type"`
	Name string `json:"name"`
	// CoordinatesIn is there only for a site that came in metres.
	CoordinatesIn *string  `json:"coordinates_in,omitempty"`
	Cases         []string `json:"cases"`
	Note          string   `json:"note"`
}

// write writes the collection, one feature a line.
func (c collection) write(w io.Writer, features []feature) error {
	out := bufio.NewWriter(w)
	head, err := json.Marshal(c)
	if err != nil {
		return err
	}
	out.Write(head[:len(head)-1]) // without the closing brace; bufio keeps the first error for Flush
	out.WriteString(`,"features":[`)
	for i, f := range features {
		f.Type = "Feature"
		line, err := json.Marshal(f)
		if err != nil {
			return err
		}
		if i > 0 {
			out.WriteByte(',')
		}
		out.WriteByte('\n')
		out.Write(line)
	}
	out.WriteString("\n]}\n")
	return out.Flush()
}
