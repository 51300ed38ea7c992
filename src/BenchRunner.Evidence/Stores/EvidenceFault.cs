using Microsoft.Data.Sqlite;

namespace BenchRunner.Evidence.Stores;

/// <summary>Puts what the database says into words of this house: the file, what is wrong, what to do.</summary>
internal static class EvidenceFault
{
    // Result codes of the SQLite C interface (sqlite3.h).
    private const int Busy = 5;
    private const int ReadOnly = 8;
    private const int InputOutput = 10;
    private const int Corrupt = 11;
    private const int Full = 13;
    private const int CannotOpen = 14;
    private const int NotADatabase = 26;

    public static EvidenceException Explain(string path, Exception error)
    {
        string what = (error as SqliteException)?.SqliteErrorCode switch
        {
            Busy => "is held by another program; end that program first",
            ReadOnly => "cannot be written; check the rights of the file and its folder",
            InputOutput => "could not be read or written, the disk failed; check the disk",
            Corrupt => "is damaged or cut short; audit it, and go on with a new file or a backup",
            Full => "is full, or its disk is; free space or name a file on another disk",
            CannotOpen => "cannot be opened; check that its folder exists and may be written",
            NotADatabase => "is not an evidence file; name another file",
            _ => "could not be used",
        };
        return new EvidenceException($"{path}: {what} ({error.Message.ReplaceLineEndings(" ")}).", error);
    }
}
