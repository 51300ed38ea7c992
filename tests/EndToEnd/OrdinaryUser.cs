using System.Diagnostics;

namespace EndToEnd;

/// <summary>Who runs the program where the tests run as root: a user of no name and no rights.</summary>
internal sealed class OrdinaryUser
{
    private const string Number = "61234";
    private readonly string _folder;

    private OrdinaryUser(string folder) => _folder = folder;

    /// <summary>Gives the folder to the user; null where the tests themselves run as an ordinary user.</summary>
    public static OrdinaryUser? Make(string folder)
    {
        if (!OperatingSystem.IsLinux() || Environment.UserName != "root")
        {
            return null;
        }

        File.SetUnixFileMode(folder, (UnixFileMode)0b111_111_111);
        var user = new OrdinaryUser(folder);
        if (!user.Can("test", "-x", Workplace.Program))
        {
            Assert.Skip($"{Workplace.Program} cannot be run by another user: a folder above it is closed to others");
        }

        return user;
    }

    public (string Program, IEnumerable<string> Arguments) Command(string program, IEnumerable<string> arguments) => (
        "setpriv",
        [
            "--reuid", Number, "--regid", Number, "--clear-groups", "--", "env", $"HOME={_folder}", program, .. arguments,
        ]);

    private bool Can(string program, params string[] arguments)
    {
        (string command, IEnumerable<string> all) = Command(program, arguments);
        using Process asked = Process.Start(command, all);
        asked.WaitForExit();
        return asked.ExitCode == 0;
    }
}
