package scenarios

import "reflect"

// Label is the default label of a smoother or rule: its kind, then the required
// options by value, then those away from their defaults: words by value, what is true
// by name, others by name and value.
func Label(kind string, defaults, options any) string {
	usual := fieldsOf(defaults)
	for i, f := range fieldsOf(options) {
		text := plainText(f.value)
		switch {
		case f.Required:
			kind += " " + text
		case text == plainText(usual[i].value):
		case len(f.Allowed) > 0:
			kind += " " + text
		case text == "true":
			kind += " " + f.Name
		default:
			kind += " " + f.Name + " " + text
		}
	}
	return kind
}

// plainText is valueAsText without the quotes around a text.
func plainText(v reflect.Value) string {
	if v.Kind() == reflect.String {
		return v.String()
	}
	return valueAsText(v)
}
