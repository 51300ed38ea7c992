namespace BenchRunner.Benchmarks;

/// <summary>What one capture costs on the links, from one train to the next at the same operating point.</summary>
/// <param name="Reading">Questions that read the record.</param>
/// <param name="Channels">Channels read.</param>
/// <param name="OfScope">All questions to the scope: reading, arming, waiting.</param>
/// <param name="Took">From train to train, s.</param>
/// <param name="Arming">From the first word of arming to the train, s.</param>
/// <param name="Transfer">From the first question to the last answer of reading, s.</param>
internal sealed record CaptureTraffic(
    int Reading, int Channels, int OfScope, double Took, double Arming, double Transfer);
