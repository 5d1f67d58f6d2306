package store

import "golang.org/x/sys/unix"

// networkFS says whether a folder stands on a network file system, and on which.
// A file system that is not known counts as local. FUSE may be either: it is what
// sshfs and many cluster file systems come as, so it counts as one.
func networkFS(folder string) (name string, yes bool) {
	var fs unix.Statfs_t
	if unix.Statfs(folder, &fs) != nil {
		return "", false // opening the file will tell what is wrong
	}
	name, yes = networkMagic[uint32(fs.Type)]
	return name, yes
}

// networkMagic are the f_type of statfs(2) of file systems that several machines
// share: from that manual page and linux/magic.h; Lustre, GPFS, BeeGFS and PanFS
// from the headers of their clients, as GNU coreutils' stat lists them.
var networkMagic = map[uint32]string{
	unix.NFS_SUPER_MAGIC:   "NFS",
	unix.SMB_SUPER_MAGIC:   "SMB",
	unix.SMB2_SUPER_MAGIC:  "SMB",
	unix.CIFS_SUPER_MAGIC:  "CIFS",
	unix.AFS_SUPER_MAGIC:   "AFS",
	unix.AFS_FS_MAGIC:      "AFS",
	unix.CODA_SUPER_MAGIC:  "Coda",
	unix.CEPH_SUPER_MAGIC:  "Ceph",
	unix.OCFS2_SUPER_MAGIC: "OCFS2",
	unix.V9FS_MAGIC:        "9P",
	unix.FUSE_SUPER_MAGIC:  "FUSE",
	0x564c:                 "NCP",
	0x0bd00bd0:             "Lustre",
	0x47504653:             "GPFS",
	0x19830326:             "BeeGFS",
	0xaad7aaea:             "PanFS",
	0x01161970:             "GFS2",
}
