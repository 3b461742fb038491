package show

import (
	"encoding/json"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"driploop/bom"
)

// The page of a format and its JSON tell the keys of the tables that stand inside a
// value, however deep, each table once.
func TestBasisInlineTables(t *testing.T) {
	topic := (&Basis{}).Find("plan")
	var got []string
	for _, b := range topic.Page.Blocks {
		if !strings.Contains(b.Head, " = ") {
			continue
		}
		words := []string{}
		for _, it := range b.Items {
			words = append(words, it.Name)
		}
		got = append(got, b.Head+": "+strings.Join(words, " "))
	}
	want := []string{
		"device.ID.set = { NAME = { … } }: back_off_db",
		"device.ID.copies = { NAME = { … } }: place at",
		"area.walls = [{ … }]: name loss_db",
		"area.before = [{ … }]: operator band rsrp_dbm",
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Errorf("the page (-want +got):\n%s", diff)
	}
	b, err := json.Marshal(keysJSON(bom.DescribePlan()))
	if err != nil {
		t.Fatal(err)
	}
	var keys []keyJSON
	if err := json.Unmarshal(b, &keys); err != nil {
		t.Fatal(err)
	}
	device, area := under(keys, "device"), under(keys, "area")
	for _, c := range []struct {
		keys []keyJSON
		want string
	}{
		{typeOf(device, "set").Each.Keys, "back_off_db"},
		{typeOf(device, "copies").Each.Choice[1].Keys, "place at"},
		{typeOf(area, "walls").List.Choice[1].Keys, "name loss_db"},
		{typeOf(area, "before").List.Keys, "operator band rsrp_dbm"},
	} {
		names := []string{}
		for _, k := range c.keys {
			names = append(names, k.Key)
		}
		if !slices.Equal(names, strings.Fields(c.want)) {
			t.Errorf("the JSON has %v, wanted %s", names, c.want)
		}
	}
}

func find(keys []keyJSON, name string) *keyJSON {
	return &keys[slices.IndexFunc(keys, func(k keyJSON) bool { return k.Key == name })]
}

func under(keys []keyJSON, name string) []keyJSON  { return find(keys, name).Keys }
func typeOf(keys []keyJSON, name string) *typeJSON { return find(keys, name).Type }
