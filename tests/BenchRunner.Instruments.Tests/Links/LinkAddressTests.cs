using BenchRunner.Instruments.Links;

namespace BenchRunner.Instruments.Tests.Links;

public class LinkAddressTests
{
    [Theory]
    [InlineData("tcp 127.0.0.1 5025", "tcp 127.0.0.1 5025")]
    [InlineData("tcp 127.0.0.1:5025", "tcp 127.0.0.1 5025")]
    [InlineData("tcp  scope.lab   1", "tcp scope.lab 1")]
    [InlineData("tcp [::1]:5025", "tcp ::1 5025")]
    [InlineData("tcp ::1 5025", "tcp ::1 5025")]
    [InlineData("tcp 127.0.0.1:0", "tcp 127.0.0.1 0")]
    [InlineData("serial /dev/pts/7", "serial /dev/pts/7")]
    [InlineData("serial COM3 9600", "serial COM3 9600")]
    public void An_address_is_read_in_every_form_and_written_in_one(string text, string written)
    {
        var address = LinkAddress.Parse(text);
        Assert.Equal(written, address.ToString());
        Assert.Equal(address, LinkAddress.Parse(written));
    }

    [Fact]
    public void A_serial_line_without_a_speed_has_115200_baud() =>
        Assert.Equal(
            new LinkAddress(LinkKind.Serial, "/dev/ttyUSB0", 115_200), LinkAddress.Parse("serial /dev/ttyUSB0"));

    [Theory]
    [InlineData("")]
    [InlineData("tcp")]
    [InlineData("tcp 127.0.0.1")]
    [InlineData("tcp 127.0.0.1:")]
    [InlineData("tcp :5025")]
    [InlineData("tcp 127.0.0.1 65536")]
    [InlineData("tcp 127.0.0.1 -1")]
    [InlineData("tcp 127.0.0.1 5025 7")]
    [InlineData("serial")]
    [InlineData("serial /dev/x 0")]
    [InlineData("serial /dev/x fast")]
    [InlineData("udp 127.0.0.1 5025")]
    public void What_is_no_address_is_refused_with_what_to_write(string text)
    {
        Assert.False(LinkAddress.TryParse(text, out _, out var problem));
        Assert.Contains($"'{text}'", problem, StringComparison.Ordinal);
        Assert.Contains("tcp HOST PORT", problem, StringComparison.Ordinal);
    }
}
