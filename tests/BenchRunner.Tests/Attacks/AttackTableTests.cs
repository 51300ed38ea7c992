using System.Text.Json;

namespace BenchRunner.Tests.Attacks;

/// <summary>Each attack of the check data has a test that is there by its name, or a reason why this program has nothing
/// to attack.</summary>
public sealed class AttackTableTests
{
    private const string NoServer = "this program serves no web page, answers no network request and keeps no session";

    private static readonly Dictionary<string, string[]> _tests = new()
    {
        ["A01"] = ["An_endless_line_is_dropped_with_its_link", "A_hundred_megabytes_without_an_end_leave_memory_flat"],
        ["A02"] = ["What_is_no_block_of_the_due_length_is_refused_by_name", "A_block_that_stops_in_the_middle_costs_the_connection"],
        ["A03"] = ["Whatever_comes_is_a_value_or_a_documented_exception_within_bounds",
            "An_announced_length_is_refused_from_its_digits_before_memory_is_taken"],
        ["A04"] = ["A_faulty_input_is_named"],
        ["A05"] = ["A_flood_that_does_not_end_breaks_the_link"],
        ["A06"] = ["Controls_and_marks_of_direction_are_escaped", "Control_and_direction_characters_are_escaped_in_a_table"],
        ["A07"] = ["Whatever_is_sent_stays_one_line_within_its_bound", "A_line_break_in_a_reason_forges_no_second_entry"],
        ["A08"] = ["A_text_that_looks_like_a_formula_is_none_in_a_spreadsheet", "Csv_is_quoted_after_RFC_4180_and_exact"],
        ["A09"] = ["A_name_that_XML_would_take_for_its_own_is_escaped", "A_picture_needs_nothing_from_outside_and_can_be_read"],
        ["A10"] = ["All_else_is_refused_in_words_and_changes_nothing", "A_question_without_end_ends_with_its_token"],
        ["A11"] = ["Without_a_form_a_serial_still_holds_only_what_is_safe_in_paths_and_tables"],
        ["A12"] = ["A_broken_file_gives_its_messages", "A_file_of_more_than_256_KiB_is_refused_before_it_is_read_as_YAML",
            "Endless_nesting_ends_at_the_bound"],
        ["A13"] = ["A_link_that_leads_out_of_the_folder_is_not_followed",
            "A_link_at_the_evidences_place_is_refused_and_what_it_leads_to_stays",
            "A_picture_is_not_written_through_a_link",
            "A_link_in_the_locks_place_holds_the_bench_and_is_named",
            "A_link_in_the_latchs_place_stands_as_a_latch_and_is_not_written_through"],
        ["A14"] = ["A_packed_file_is_counted_before_it_is_read", "Damaged_bytes_give_codes_or_a_clear_refusal"],
        ["A19"] = ["Any_single_altered_byte_of_the_file_is_found_or_lies_in_nothing_that_is_stored",
            "What_was_done_past_the_triggers_is_found"],
        ["A20"] = ["Runs_cut_off_the_end_are_found_by_a_seal_kept_outside"],
        ["A22"] = ["A_wrong_identity_is_refused_with_the_place_that_asks_for_another",
            "Another_instrument_behind_the_same_address_is_refused"],
    };

    private static readonly Dictionary<string, string> _nothingToAttack = new()
    {
        ["A15"] = NoServer,
        ["A16"] = NoServer,
        ["A17"] = NoServer,
        ["A18"] = NoServer,
        ["A21"] = "tried with the guardian's own tests, by processes",
    };

    /// <summary>Source: tests/reference/scpi/faults.json, attacks (house rules).</summary>
    [Fact]
    public void Every_attack_has_a_test_or_a_reason()
    {
        using JsonDocument file = JsonDocument.Parse(
            File.ReadAllText(Path.Combine(Repository.Root, "tests", "reference", "scpi", "faults.json")));
        string[] attacks =
            [.. file.RootElement.GetProperty("attacks").EnumerateArray().Select(a => a.GetProperty("id").GetString()!)];
        Assert.Equal(22, attacks.Length);
        Assert.Equal(attacks, _tests.Keys.Concat(_nothingToAttack.Keys).Order());

        string[] sources = [.. Directory
            .EnumerateFiles(Path.Combine(Repository.Root, "tests"), "*Tests.cs", SearchOption.AllDirectories)
            .Select(File.ReadAllText)];
        Assert.All(_tests.Values.SelectMany(names => names), name => Assert.Contains(
            sources, source => source.Contains($" {name}(", StringComparison.Ordinal)));
    }
}
