package main

import (
	"os"
	"path/filepath"
	"testing"

	"github.com/stretchr/testify/require"
)

func entries(t *testing.T, folder string) []string {
	t.Helper()
	list, err := os.ReadDir(folder)
	require.NoError(t, err)
	var names []string
	for _, e := range list {
		names = append(names, e.Name())
	}
	return names
}

func TestWriteFileReplacesWhole(t *testing.T) {
	folder := t.TempDir()
	path := filepath.Join(folder, "out.json")
	for _, content := range []string{"first, which is longer", "second"} {
		require.NoError(t, writeFile(path, []byte(content)))
		got, err := os.ReadFile(path)
		require.NoError(t, err)
		require.Equal(t, content, string(got))
		require.Equal(t, []string{"out.json"}, entries(t, folder), "nothing else is left")
	}
}

func TestWriteFileKeepsModeAndLink(t *testing.T) {
	folder := t.TempDir()
	path, link := filepath.Join(folder, "real"), filepath.Join(folder, "link")
	require.NoError(t, os.WriteFile(path, []byte("old"), 0o640))
	require.NoError(t, os.Symlink("real", link))
	require.NoError(t, writeFile(link, []byte("new")))
	info, err := os.Lstat(link)
	require.NoError(t, err)
	require.NotZero(t, info.Mode()&os.ModeSymlink)
	info, err = os.Stat(path)
	require.NoError(t, err)
	require.Equal(t, os.FileMode(0o640), info.Mode().Perm())
	got, err := os.ReadFile(path)
	require.NoError(t, err)
	require.Equal(t, "new", string(got))
}

func TestWriteFileRefusals(t *testing.T) {
	folder := t.TempDir()
	plain := filepath.Join(folder, "plain")
	require.NoError(t, os.WriteFile(plain, nil, 0o666))
	for name, path := range map[string]string{
		"folder":                        folder,
		"missing folder":                filepath.Join(folder, "no", "such"),
		"file where a folder is needed": filepath.Join(plain, "x"),
	} {
		err := writeFile(path, []byte("content"))
		require.ErrorContains(t, err, "cannot be written", name)
		require.Equal(t, []string{"plain"}, entries(t, folder), name)
	}
}

// A full device: the error is reported, and the device is still there.
func TestWriteFileToDevice(t *testing.T) {
	require.NoError(t, writeFile(os.DevNull, []byte("x")))
	info, err := os.Stat(os.DevNull)
	require.NoError(t, err)
	require.NotZero(t, info.Mode()&os.ModeDevice, "a device is not replaced by a file")
	if _, err := os.Stat("/dev/full"); err == nil {
		require.ErrorContains(t, writeFile("/dev/full", []byte("x")), "cannot be written")
	}
}

func TestPrepareFolder(t *testing.T) {
	folder := filepath.Join(t.TempDir(), "a", "b")
	require.NoError(t, prepareFolder(folder))
	require.Empty(t, entries(t, folder))
	plain := file(t, "plain", "")
	require.ErrorContains(t, prepareFolder(plain), "cannot be written to")
	require.ErrorContains(t, prepareFolder(filepath.Join(plain, "x")), "cannot be written to")
}
