package results

import (
	"bytes"
	"crypto/sha256"
	"encoding/binary"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"

	"github.com/apache/arrow/go/v17/arrow/array"
	"github.com/apache/arrow/go/v17/arrow/ipc"
	"github.com/apache/arrow/go/v17/arrow/memory"
	"github.com/klauspost/compress/zstd"
)

// A Part is what one unit of work yields.
type Part struct {
	Fits    []Fit
	Picks   []Pick
	Moments []Moment

	Variants []Variant // the study's own columns of fits
}

// A BrokenPartError says that a part file is not what was written. The unit is to
// be worked again.
type BrokenPartError struct {
	Path   string
	Reason string
}

func (e *BrokenPartError) Error() string { return fmt.Sprintf("%s: broken part: %s", e.Path, e.Reason) }

// A part file is partMagic, the SHA-256 hash of all that follows, and, compressed by
// zstd, the three tables as Arrow streams, each after its length. Parquet would take
// thirty times as long for so few rows.
const partMagic = "bendtest part 2\n"

const partHead = len(partMagic) + sha256.Size

// maxPart bounds what a part may unpack to.
const maxPart = 1 << 32

// encode returns the bytes of a part file.
func (p *Part) encode() ([]byte, error) {
	var plain []byte
	add := func(stream func(io.Writer) error) error {
		var b bytes.Buffer
		if err := stream(&b); err != nil {
			return err
		}
		plain = binary.BigEndian.AppendUint64(plain, uint64(b.Len()))
		plain = append(plain, b.Bytes()...)
		return nil
	}
	for _, stream := range []func(io.Writer) error{
		func(w io.Writer) error { return writeStream(FitsWith(p.Variants), w, p.Fits) },
		func(w io.Writer) error { return writeStream(Picks, w, p.Picks) },
		func(w io.Writer) error { return writeStream(moments, w, p.Moments) },
	} {
		if err := add(stream); err != nil {
			return nil, err
		}
	}
	packer, err := zstd.NewWriter(nil, zstd.WithEncoderLevel(zstd.SpeedFastest), zstd.WithEncoderConcurrency(1))
	if err != nil {
		return nil, err
	}
	data := append([]byte(partMagic), make([]byte, sha256.Size)...)
	data = packer.EncodeAll(plain, data)
	sum := sha256.Sum256(data[partHead:])
	copy(data[len(partMagic):], sum[:])
	return data, nil
}

// Size is the number of bytes that the part takes on disk.
func (p *Part) Size() (int, error) {
	data, err := p.encode()
	return len(data), err
}

// writeStream writes rows as an Arrow stream of one record.
func writeStream[R any](t *Table[R], w io.Writer, rows []R) error {
	schema := t.arrowSchema()
	builder := array.NewRecordBuilder(memory.DefaultAllocator, schema)
	defer builder.Release()
	for i := range rows {
		if err := t.appendRow(builder, &rows[i]); err != nil {
			return fmt.Errorf("table %s, row %d, %w", t.Name, i, err)
		}
	}
	record := builder.NewRecord()
	defer record.Release()
	out := ipc.NewWriter(w, ipc.WithSchema(schema))
	if err := out.Write(record); err != nil {
		return err
	}
	return out.Close()
}

// readStream calls yield with each row of an Arrow stream.
func readStream[R any](t *Table[R], data []byte, yield func(*R) error) error {
	in, err := ipc.NewReader(bytes.NewReader(data))
	if err != nil {
		return err
	}
	defer in.Release()
	for in.Next() {
		if err := t.rows(in.Record(), yield); err != nil {
			return err
		}
	}
	return in.Err()
}

// streams are the three Arrow streams of a part.
type streams [3][]byte

// openPart checks the bytes of a part file and returns its streams.
func openPart(data []byte) (found streams, err error) {
	if len(data) < partHead || string(data[:len(partMagic)]) != partMagic {
		return found, errors.New("it is cut short or not a part of this version")
	}
	body := data[partHead:]
	if sum := sha256.Sum256(body); !bytes.Equal(sum[:], data[len(partMagic):partHead]) {
		return found, errors.New("its checksum is wrong")
	}
	unpacker, err := zstd.NewReader(nil, zstd.WithDecoderMaxMemory(maxPart), zstd.WithDecoderConcurrency(1))
	if err != nil {
		return found, err
	}
	defer unpacker.Close()
	plain, err := unpacker.DecodeAll(body, nil)
	if err != nil {
		return found, fmt.Errorf("it does not unpack: %w", err)
	}
	for i := range found {
		if len(plain) < 8 || binary.BigEndian.Uint64(plain) > uint64(len(plain)-8) {
			return found, errors.New("its lengths do not add up")
		}
		end := 8 + binary.BigEndian.Uint64(plain)
		found[i], plain = plain[8:end], plain[end:]
	}
	return found, nil
}

// partPath is where the part with a key lies.
func (d *Dir) partPath(key string) string { return filepath.Join(d.path, partsFolder, key+".part") }

// WritePart keeps a unit's rows under a key. It is safe to call from several
// goroutines with different keys.
func (d *Dir) WritePart(key string, p *Part) error {
	data, err := p.encode()
	if err != nil {
		return err
	}
	return commit(d.disk, d.partPath(key), func(w io.Writer) error {
		_, err := w.Write(data)
		return err
	})
}

// CheckPart reports whether the part with a key is there and intact. A broken part
// is a *BrokenPartError.
func (d *Dir) CheckPart(key string) (bool, error) {
	_, err := d.loadPart(key)
	if errors.Is(err, fs.ErrNotExist) {
		return false, nil
	}
	return err == nil, err
}

// loadPart reads and checks a part file.
func (d *Dir) loadPart(key string) (streams, error) {
	path := d.partPath(key)
	data, err := os.ReadFile(path)
	if err != nil {
		return streams{}, err
	}
	found, err := openPart(data)
	if err != nil {
		return streams{}, &BrokenPartError{path, err.Error()}
	}
	return found, nil
}

// CopyPart brings the part with a key from another run directory, intact or not at all. It
// reports whether it is there.
func (d *Dir) CopyPart(key string, from *Dir) (bool, error) {
	there, err := from.CheckPart(key)
	if !there || err != nil {
		return false, err
	}
	data, err := os.ReadFile(from.partPath(key))
	if err != nil {
		return false, err
	}
	return true, commit(d.disk, d.partPath(key), func(w io.Writer) error {
		_, err := w.Write(data)
		return err
	})
}

// A PartReader takes the rows of parts, in order; a row is overwritten by the next. Rows
// that no function is there for are not unpacked.
type PartReader struct {
	Fit    func(*Fit) error
	Pick   func(*Pick) error
	Moment func(*Moment) error

	Variants []Variant // the study's own columns of fits
}

// ReadPart reads the part with a key.
func (d *Dir) ReadPart(key string, to PartReader) error {
	found, err := d.loadPart(key)
	if err != nil {
		return err
	}
	if err := readIf(FitsWith(to.Variants), found[0], to.Fit); err != nil {
		return err
	}
	if err := readIf(Picks, found[1], to.Pick); err != nil {
		return err
	}
	return readIf(moments, found[2], to.Moment)
}

// readIf reads a stream if there is somebody to take its rows.
func readIf[R any](t *Table[R], data []byte, yield func(*R) error) error {
	if yield == nil {
		return nil
	}
	return readStream(t, data, yield)
}
