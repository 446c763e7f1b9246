using System.Text;

namespace ImpedanceScreen.Records.Sealing;

/// <summary>
/// The text that stands before every body while it is packed, so that names and words which every body has cost next to
/// nothing. It belongs to the stored bytes: a released dictionary is never changed.
/// </summary>
internal static class PackingDictionary
{
    /// <summary>ASCII; one line.</summary>
    public static byte[] Bytes { get; } = Encoding.ASCII.GetBytes(
        """
        {"at_utc":"2026-","format":1,"kind":"hold","lot":null,"program":"0.1.0","reason":"
        {"aborted":0,"boards":24,"closed_utc":"2026-","failed":0,"format":1,"kind":"lot-close","lot":"
        "passed":24,"product":"","program":"0.1.0","retest":0,"started_utc":"2026-
        "retest","aborted","fail","overload","unstable","curved","current-limited","no-source",false,false],[true,true
        {"attempt":1,"attempt_id":"019,"budget_inputs":{"distribution":["normal","normal","normal","rectangular","normal",
        "rectangular"],"dof":[null,null,null,null,null,60,null,null],"name":["certificate ","load ","meter gain",
        "meter offset","noise","lead","load temperature","branch","meter input resistance","resolution"],"type":["b","b",
        "b","a","b"]},"cause":"","disposition":"pass","ended_utc":"2026-,
        "fixture":"","fixture_sha256":"","format":1,"kind":"board","limits_sha256":"","lot":"","meters":[{"idn":"
        ","name":"meter-1"}],"operator":"","previous_attempt_id":null,"product":"","program":"0.1.0","revision":"","serial":"
        ","started_utc":"2026-,"states":{"budget_input":[[1,2,3,0,4,5,6,7,8,9,10,11,12],[2,3,1,0,4,6,5,7,8,9,10,12,11],
        "budget_rth_ohm":[[-0.00,0.00,-0.0000,0.0000],[0.0,-0.0,"budget_vth_v":[[0.00000,-0.00000,
        "chi_squared":[,0.,"correlation":[-0.,-0.,"decision":["pass","pass","pass"],"dof":[2,2,2],
        "fault":[null,null,null],"k_rth":[1.95,1.9,"k_vth":[1.9,1.9,"limit_conformity":[[1,1,1],[1,1,1]],
        "limit_decision":[["pass","pass","pass"],["pass","pass","pass"]],
        "limit_guard_band":[[0.000,0.,0],[0.00,0.,0],"limit_guard_factor":[[1,1,0],[1,1,0]],
        "limit_max":[[,0.2],["limit_min":[[,null,null],[,null,null],
        "limit_quantity":[["source-voltage","internal-resistance","droop"],["source-voltage","internal-resistance"
        ,"droop"],"limit_rated_load_ohm":[[null,null,1000],[null,null,
        "limit_u95":[[0.000,0.,0.0000],[0.000,0.,0.0000],"limit_value":[[,0.0],["output":["","p_value":[0.,0.
        "point_contact":[[null,true,true,true],[null,null,null,null],"point_load":[[null,"L10k","L4k7","L2k2"],[null,"L
        "point_reads_return":[[false,false,false,false],[false,false,false,false]],
        "range_v":[10,10,10],"reading_after_ms":[[[,104,104],[,104],[
        "reading_raw":[[["+0.00000E+00","-0.00000E-01","+1.0000E+00"],["+
        "rth_ohm":[,"state":["high","low","default","u_rth_ohm":[0.0,0.0,"u_vth_v":[0.0000,0.0000,"vth_v":[
        ]},"station":"","temperature_degc":23.,"time_ms":{"integrating":,"other":,"settling":,"switching":,"talking":}}
        """.ReplaceLineEndings(string.Empty));
}
