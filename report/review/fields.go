package review

import (
	"fmt"
	"reflect"
	"strings"

	"halfspan/convert/working"
)

// FieldNames lists the names of the record's fields, in order.
func FieldNames() []string {
	t := reflect.TypeFor[working.Record]()
	names := make([]string, t.NumField())
	for i := range names {
		names[i] = fieldName(t.Field(i))
	}
	return names
}

func fieldName(f reflect.StructField) string {
	name, _, _ := strings.Cut(f.Tag.Get("json"), ",")
	return name
}

// Field writes one field of a record as text: empty where the record has none
// (null); words of a list parted by spaces, numbers with 9 significant digits.
// ok is false where no field has that name.
func Field(r *working.Record, name string) (text string, ok bool) {
	v := reflect.ValueOf(r).Elem()
	for i := range v.NumField() {
		if fieldName(v.Type().Field(i)) == name {
			return fieldText(v.Field(i)), true
		}
	}
	return "", false
}

func fieldText(v reflect.Value) string {
	if v.Kind() == reflect.Pointer {
		if v.IsNil() {
			return ""
		}
		v = v.Elem()
	}
	switch value := v.Interface().(type) {
	case string:
		return value
	case float64:
		return working.Number(value).String()
	case []string:
		return strings.Join(value, " ")
	}
	return fmt.Sprint(v.Interface())
}
