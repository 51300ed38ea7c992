using System.CommandLine;

namespace BenchRunner.Commands;

/// <summary>All commands.</summary>
internal static class CommandTree
{
    public static RootCommand Build() => new(
        "Measures switching devices by double pulses, keeps the evidence, decides device by device. "
            + "LETHAL VOLTAGES: this program is not a safety device; interlock, emergency stop and bleeder are "
            + "hardware.")
    {
        PlanCommand.Build(),
        RunCommand.Build(),
        AnalyseCommand.Build(),
        CompareCommand.Build(),
        QueryCommand.Build(),
        AuditCommand.Build(),
        EvidenceCommand.Build(),
        QuantitiesCommand.Build(),
        SchemaCommand.Build(),
        BenchCommand.Build(),
        GuardCommand.Build(),
    };
}
