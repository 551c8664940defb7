//! Files written whole or not at all.

use super::failure::Failure;
use std::fs;
use std::io::{self, Write};
use std::path::{Path, PathBuf};
use tempfile::NamedTempFile;

/// A file to write: its name in the folder, and its bytes.
pub struct OutputFile<'a> {
    /// Its name.
    pub name: &'a str,
    /// All of it.
    pub bytes: Vec<u8>,
}

/// Writes files into a folder, which is made if need be. All are staged beside their places before the first takes its own.
///
/// # Errors
/// With the first file or folder that can't be written.
pub fn write_files(folder: &Path, files: &[OutputFile<'_>]) -> Result<(), Failure> {
    fs::create_dir_all(folder).map_err(|source| failure(folder.to_owned(), source))?;
    let mut staged = Vec::new();
    for file in files {
        let path = folder.join(file.name);
        let temporary = stage(folder, &file.bytes).map_err(|source| failure(path.clone(), source))?;
        staged.push((temporary, path));
    }
    for (temporary, path) in staged {
        temporary.persist(&path).map_err(|error| failure(path, error.error))?;
    }
    Ok(())
}

/// Writes one new file; one that is there already is left as it is.
///
/// # Errors
/// When the file exists, or can't be written.
pub fn write_new(path: &Path, bytes: &[u8]) -> Result<(), Failure> {
    let folder = path.parent().filter(|folder| !folder.as_os_str().is_empty()).unwrap_or(Path::new("."));
    if !folder.is_dir() {
        return Err(Failure::NoFolder { folder: folder.to_owned() });
    }
    let temporary = stage(folder, bytes).map_err(|source| failure(path.to_owned(), source))?;
    match temporary.persist_noclobber(path) {
        Ok(_) => Ok(()),
        Err(error) if error.error.kind() == io::ErrorKind::AlreadyExists => Err(Failure::Exists { path: path.to_owned() }),
        Err(error) => Err(failure(path.to_owned(), error.error)),
    }
}

fn stage(folder: &Path, bytes: &[u8]) -> io::Result<NamedTempFile> {
    let mut builder = tempfile::Builder::new();
    // A temporary file is private by default; a result is as readable as any other new file.
    #[cfg(unix)]
    let permissions = std::os::unix::fs::PermissionsExt::from_mode(0o666);
    #[cfg(unix)]
    builder.permissions(permissions);
    let mut file = builder.prefix(".soakdown-").tempfile_in(folder)?;
    file.write_all(bytes)?;
    file.as_file().sync_all()?;
    Ok(file)
}

fn failure(path: PathBuf, source: io::Error) -> Failure {
    Failure::Write { path, source }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn file(name: &str) -> OutputFile<'_> {
        OutputFile { name, bytes: b"x".to_vec() }
    }

    #[test]
    fn folders_are_made_and_nothing_else_is_left() {
        let root = tempfile::tempdir().expect("a folder");
        let folder = root.path().join("a/b");
        write_files(&folder, &[file("one.csv"), file("two.csv")]).expect("written");
        write_files(&folder, &[file("one.csv")]).expect("written again");
        let mut names: Vec<_> = fs::read_dir(&folder)
            .expect("the folder")
            .map(|entry| entry.expect("an entry").file_name())
            .collect();
        names.sort();
        assert_eq!(names, ["one.csv", "two.csv"]);
    }

    #[test]
    fn a_file_that_can_not_take_its_place_is_named() {
        let root = tempfile::tempdir().expect("a folder");
        fs::create_dir(root.path().join("one.csv")).expect("in the way");
        let error = write_files(root.path(), &[file("one.csv")]).expect_err("a folder is in the way");
        assert!(error.to_string().contains("one.csv was not written"), "{error}");
        assert_eq!(fs::read_dir(root.path()).expect("the folder").count(), 1);
    }

    #[test]
    fn a_file_in_the_place_of_the_folder_is_named() {
        let root = tempfile::tempdir().expect("a folder");
        let path = root.path().join("results");
        fs::write(&path, "x").expect("in the way");
        let error = write_files(&path, &[file("one.csv")]).expect_err("a file is in the way");
        assert!(error.to_string().contains("results was not written"), "{error}");
    }
}
