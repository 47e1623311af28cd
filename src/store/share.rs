//! Whether a folder lies on a network share, where file locks cannot be trusted.

use std::path::Path;

/// File systems that several computers can mount at once (their names in Linux; common practice, no source).
const SHARED: [&str; 14] = [
    "nfs",
    "nfs4",
    "cifs",
    "smb3",
    "smbfs",
    "ncpfs",
    "afs",
    "ceph",
    "glusterfs",
    "lustre",
    "gfs2",
    "ocfs2",
    "fuse.sshfs",
    "fuse.glusterfs",
];

/// The kind of network share that `folder` lies on; `None` if it lies on a disk of this computer, or if the system does
/// not tell (only Linux does).
#[must_use]
pub fn share_of(folder: &Path) -> Option<String> {
    let mounts = std::fs::read_to_string("/proc/self/mountinfo").ok()?;
    let folder = folder.canonicalize().ok()?;
    let kind = kind_of(&mounts, &folder)?;
    SHARED.contains(&kind.as_str()).then_some(kind)
}

/// The kind of file system at the mount point nearest above `folder`, from lines as in /proc/self/mountinfo (proc(5)): the
/// fifth field is the mount point, the kind follows " - ".
fn kind_of(mounts: &str, folder: &Path) -> Option<String> {
    let one = |line: &str| {
        let (fields, rest) = line.split_once(" - ")?;
        // A space within a path is written \040.
        let point = fields.split(' ').nth(4)?.replace("\\040", " ");
        let depth = Path::new(&point).components().count();
        folder.starts_with(&point).then(|| (depth, rest.split(' ').next().unwrap_or_default().to_owned()))
    };
    // Of several mounts at one point the last hides the others; `max_by_key` keeps the last.
    mounts.lines().filter_map(one).max_by_key(|(depth, _)| *depth).map(|(_, kind)| kind)
}

#[cfg(test)]
mod tests {
    use super::kind_of;
    use std::path::Path;

    const MOUNTS: &str = "22 1 8:1 / / rw,relatime shared:1 - ext4 /dev/sda1 rw\n\
        40 22 0:31 / /srv/port\\040office rw - nfs4 server:/port rw\n\
        41 40 8:2 / /srv/port\\040office/local rw - xfs /dev/sdb1 rw\n";

    #[test]
    fn the_nearest_mount_point_above_a_folder_counts() {
        let kind = |folder| kind_of(MOUNTS, Path::new(folder)).unwrap();
        assert_eq!(kind("/home/x"), "ext4");
        assert_eq!(kind("/srv/port office/quillhaven"), "nfs4");
        assert_eq!(kind("/srv/port office/local/quillhaven"), "xfs");
        assert_eq!(kind("/srv/port officers"), "ext4");
    }
}
