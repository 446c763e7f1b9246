using ImpedanceScreen.Files;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Fixtures;

/// <summary>Reads load banks and load returns of a fixture file.</summary>
internal static class LoadReader
{
    private const double PartsPerMillion = 1e-6;

    internal static LoadBank Bank(MappingReader reader, FixtureNames names)
    {
        // A limit file names loads without their bank: it fits benches with one bank and with one an output alike.
        NameTable loads = new("load");
        LoadBank bank = new(
            names.Banks.Declare(reader),
            reader.Mappings("loads", 1, load => Load(load, names, loads)));
        if (reader.Bound("name", "loads"))
        {
            names.LoadsWithoutContact[bank.Name] = string.Join(
                ", ", bank.Loads.Where(load => load.Relay.ContactInput is null).Select(load => load.Name));
        }

        return bank;
    }

    internal static LoadReturn Return(MappingReader reader, FixtureNames names) => new(
        names.Returns.Declare(reader),
        reader.Mapping("relay", relay => RelayReader.Relay(relay, names)),
        reader.Mapping("sense_relay", relay => RelayReader.Relay(relay, names)),
        names.Meters.Refer(reader, "meter"),
        new(
            ExtraLowVoltage.Dc(reader, "voltage_v", reader.Number("voltage_v", NumberRange.Any)),
            reader.Number("voltage_standard_uncertainty_v", NumberRange.ZeroOrMore)),
        reader.Number("current_limit_a", NumberRange.Positive));

    /// <summary>Dates of a certificate: a calibration is not due before it was made.</summary>
    internal static (DateOnly On, DateOnly Due) Dates(MappingReader reader)
    {
        (DateOnly on, DateOnly due) = (reader.Date("calibrated_on"), reader.Date("due_on"));
        if (reader.Bound("calibrated_on", "due_on") && due < on)
        {
            reader.Mistake("due_on", "the calibration is due before it was made", "correct one of the dates");
        }

        return (on, due);
    }

    private static Load Load(MappingReader reader, FixtureNames names, NameTable loads)
    {
        string name = loads.Declare(reader);
        Relay relay = reader.Mapping("relay", nested => RelayReader.Relay(nested, names));
        (DateOnly on, DateOnly due) = Dates(reader);
        Load load = new(
            name,
            relay,
            reader.Number("resistance_ohm", NumberRange.Positive),
            reader.Number("expanded_uncertainty_ohm", NumberRange.Positive),
            reader.Number("coverage_factor", new(1, 5)),
            reader.OptionalNumber("common_standard_uncertainty_ohm", NumberRange.ZeroOrMore),
            reader.Text("certificate"),
            on,
            due,
            reader.Number("temperature_coefficient_ppm_per_k", NumberRange.Any) * PartsPerMillion,
            reader.Number("calibration_temperature_deg_c", new(-40, 125)),
            reader.Number("self_heating_ppm_per_w", NumberRange.Any) * PartsPerMillion,
            reader.Number("power_rating_w", NumberRange.Positive),
            Branch(reader));
        CheckCertificate(reader, load);
        return load;
    }

    private static Uncertain Branch(MappingReader reader) => new(
        reader.Number("branch_resistance_ohm", NumberRange.ZeroOrMore),
        reader.Number("branch_standard_uncertainty_ohm", NumberRange.ZeroOrMore));

    private static void CheckCertificate(MappingReader reader, Load load)
    {
        if (reader.Bound("resistance_ohm", "expanded_uncertainty_ohm")
            && load.ExpandedUncertaintyOhm >= load.ResistanceOhm)
        {
            reader.Mistake(
                "expanded_uncertainty_ohm", "as large as the resistance itself",
                "give it in ohm, not in percent or ppm");
        }

        if (reader.Bound("common_standard_uncertainty_ohm", "expanded_uncertainty_ohm", "coverage_factor")
            && load.CommonUncertaintyOhm > load.StandardUncertaintyOhm)
        {
            reader.Mistake(
                "common_standard_uncertainty_ohm", "larger than the whole: expanded_uncertainty_ohm / coverage_factor",
                "give the part that all loads of the certificate share, as a standard uncertainty");
        }
    }
}
