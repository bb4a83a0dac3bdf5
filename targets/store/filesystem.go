package store

// networkKinds are the file systems on which the locks that a database relies
// on may be missing or slow.
//
// Source: Linux, include/uapi/linux/magic.h, and fs/ of the same for SMB.
var networkKinds = map[int64]string{
	0x6969:     "NFS",
	0x517b:     "SMB",
	0xfe534d42: "SMB2",
	0xff534d42: "CIFS",
	0x5346414f: "AFS",
	0x6b414653: "AFS",
	0x01021997: "9P",
	0x65735546: "FUSE (sshfs and others)",
	0x73757245: "Coda",
	0x0bd00bd0: "Lustre",
	0x47504653: "GPFS",
	0x00c36400: "Ceph",
}

// Advice is what to do on a network file system.
const Advice = "keep the run folder on a local disk of the machine that everybody logs in to, or work alone in it; " +
	"locks over a network are slow and on some servers not kept"

// NetworkKind names the network file system that holds a path; "" where it is
// none, or where the system does not say.
func NetworkKind(path string) string { return networkKind(path, fileSystem) }

func networkKind(path string, of func(string) (int64, error)) string {
	kind, err := of(path)
	if err != nil {
		return ""
	}
	// some kinds come sign-extended from 32 bits
	return networkKinds[kind&0xffffffff]
}
