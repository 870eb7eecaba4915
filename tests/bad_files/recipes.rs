use super::Case;

/// A recipe with one thing broken.
pub const RECIPES: &[Case] = &[
    (
        r#"arm = "arm.toml""#,
        "",
        "recipe: arm is missing; it must be the path of an arm file, seen from the recipe (recipe.toml:1:1)",
    ),
    (r#"name = "Test recipe""#, r#"nme = "Test recipe""#, r#"recipe: unknown key "nme"; did you mean "name"? (recipe.toml:2:1)"#),
    (
        "elbowroom-recipe = 1",
        "elbowroom-arm = 1",
        r#"this is an arm file, but a recipe is needed here; a recipe has the line "elbowroom-recipe = 1" (recipe.toml:1:1)"#,
    ),
    (
        "elbowroom-recipe = 1\n",
        "",
        r#"recipe: elbowroom-recipe is missing; a recipe has the line "elbowroom-recipe = 1" (recipe.toml:1:1)"#,
    ),
    (
        "elbowroom-recipe = 1",
        "elbowroom-recipe = 3",
        "recipe: elbowroom-recipe is 3; this program reads version 1 (recipe.toml:1:20)",
    ),
    (
        "rate-reserve = 10",
        "rate-reserve = 120",
        "acceptance: rate-reserve is 120 %; it must be 0 or more and below 100 (recipe.toml:9:16)",
    ),
    (
        "rate-reserve = 10",
        "rate-reserv = 10",
        r#"acceptance: unknown key "rate-reserv"; did you mean "rate-reserve"? (recipe.toml:9:1)"#,
    ),
    ("rate-reserve = 10", "range-least = -3", "acceptance: range-least is -3; it must be 0 or more (recipe.toml:9:15)"),
    (
        "mass = 3.4\n",
        "",
        r#"tool "gripper": com is given without mass; give the mass (kg) too, or leave both out (recipe.toml:17:7)"#,
    ),
    ("com = [0, 0, 60]\n", "", r#"tool "gripper": com is missing; it must be an array of 3 numbers (mm) (recipe.toml:14:1)"#),
    (
        "com = [0, 0, 60]\n",
        "com = [0, 0, 60]\nturns-freely = 1\n",
        r#"tool "gripper": turns-freely is the number 1; it must be true, or not be there (recipe.toml:19:16)"#,
    ),
    ("mass = 6.5", "mass = -1", r#"load "part": mass is -1 kg; it must be 0 or more (recipe.toml:22:8)"#),
    ("mass = 6.5\n", "", r#"load "part": mass is missing; it must be a number (kg) (recipe.toml:20:1)"#),
    (r#"name = "gripper""#, r#"nam = "gripper""#, r#"tool 1: unknown key "nam"; did you mean "name"? (recipe.toml:15:1)"#),
    ("name = \"gripper\"\n", "", "tool 1: name is missing; it must be text (recipe.toml:14:1)"),
    ("[[tool]]", "[[tools]]", r#"recipe: unknown key "tools"; did you mean "tool"? (recipe.toml:14:3)"#),
    (
        "tcp = { xyz = [0, 0, 165], rpy = [0, 0, 0] }\n",
        "",
        r#"tool "gripper": tcp is missing; it must be a table { xyz, rpy }: where the TCP stands on the flange (recipe.toml:14:1)"#,
    ),
    ("[0, 0, 165]", "[0, 0]", r#"tool "gripper": tcp: xyz has 2 values; it must be an array of 3 numbers (recipe.toml:16:15)"#),
    (
        "xyz = [500, 0, 0]",
        "xyz = [500, 0, 0]\nin = \"table\"",
        r#"frame "fixture": there is no frame above it "table"; there are "base", "world" (recipe.toml:28:6)"#,
    ),
    (
        r#"name = "fixture""#,
        r#"name = "fixtures""#,
        r#"waypoint 2 "above": there is no frame "fixture"; did you mean "fixtures"? (recipe.toml:35:39)"#,
    ),
    (
        r#"name = "fixture""#,
        r#"name = "base""#,
        "frame 1: \"base\" always names the base itself (recipe.toml:26:8)\nwaypoint 2 \"above\": there is no frame \"fixture\"; there are \"base\", \"base\", \"world\" (recipe.toml:35:39)",
    ),
    (
        r#"name = "fixture""#,
        r#"name = "tool""#,
        r#"frame "tool": "tool" always names the axes of the tool; choose another name (recipe.toml:26:8)"#,
    ),
    (
        "joints = [0, 10, 200]",
        "joints = [0, 10]",
        r#"waypoint 1 "start": joints has 2 values; the arm "Test arm" has 3 joints (recipe.toml:31:10)"#,
    ),
    (
        "joints = [0, 10, 200]",
        "joints = [0, 10, inf]",
        r#"waypoint 1 "start": joints[3] is inf; it must be a finite number (recipe.toml:31:18)"#,
    ),
    (
        "joints = [0, 10, 200]",
        "joints = [1,2,3,4,5,6,7,8,9,10]",
        r#"waypoint 1 "start": joints has 10 values; the arm "Test arm" has 3 joints (recipe.toml:31:10)"#,
    ),
    (
        "joints = [0, 10, 200]\n",
        "",
        r#"waypoint 1 "start": joints is missing; a waypoint needs joints = [...] or pose = { xyz, rpy } (recipe.toml:29:1)"#,
    ),
    (
        "joints = [0, 10, 200]",
        "joints = [0, 10, 200]\npose = { xyz = [0, 0, 0] }",
        r#"waypoint 1 "start": joints and pose are both given; keep one, and put a pose that the cell displayed under shown (recipe.toml:32:8)"#,
    ),
    (
        "joints = [0, 10, 200]",
        "joints = [0, 10, 200]\nnear = \"start\"",
        r#"waypoint 1 "start": near goes with pose; joint values already say the posture (recipe.toml:32:8)"#,
    ),
    (
        "joints = [0, 10, 200]",
        "joint = [0, 10, 200]",
        r#"waypoint 1 "start": unknown key "joint"; did you mean "joints"? (recipe.toml:31:1)"#,
    ),
    (
        r#"near = "start""#,
        r#"near = "stort""#,
        r#"waypoint 2 "above": there is no waypoint before it "stort"; did you mean "start"? (recipe.toml:36:8)"#,
    ),
    (
        r#"near = "start""#,
        r#"near = "round""#,
        r#"waypoint 2 "above": there is no waypoint before it "round"; there are "start" (recipe.toml:36:8)"#,
    ),
    (
        r#"tool = "gripper""#,
        r#"tool = "griper""#,
        r#"waypoint 2 "above": there is no tool "griper"; did you mean "gripper"? (recipe.toml:37:8)"#,
    ),
    (
        r#"arrive = "joint""#,
        r#"arrive = "jump""#,
        r#"waypoint 2 "above": arrive is "jump"; it must be "joint", "line" or "arc" (recipe.toml:38:10)"#,
    ),
    (
        "arrive = \"joint\"\n",
        "",
        r#"waypoint 2 "above": does not say how to arrive; arrive must be "joint", "line" or "arc" (recipe.toml:33:1)"#,
    ),
    (
        "share = 60\n",
        "",
        r#"waypoint 2 "above": a joint move needs a share (of the joints' rates, %), here or under [usual] (recipe.toml:33:1)"#,
    ),
    ("share = 60", "share = 0", r#"waypoint 2 "above": share is 0 %; it must be above 0 and at most 100 (recipe.toml:39:9)"#),
    ("share = 60", "share = 110", r#"waypoint 2 "above": share is 110 %; it must be above 0 and at most 100 (recipe.toml:39:9)"#),
    ("speed = 100", "speed = -1.5", r#"waypoint 4 "round": speed is -1.5; it must be above 0 (recipe.toml:55:9)"#),
    (
        "xyz = [0, 0, 600]",
        "xyz = [0, 0, 600]\nrpy = [180, 0]",
        "mount: rpy has 2 values; it must be an array of 3 numbers (recipe.toml:7:7)",
    ),
    ("xyz = [0, 0, 600]\n", "", "mount: xyz is missing; it must be an array of 3 numbers (mm) (recipe.toml:5:1)"),
    ("[[load]]", "[load]", "recipe: load is a table; it must be an array of tables, [[load]] (recipe.toml:20:1)"),
    (
        "[[frame]]\nname = \"fixture\"\nxyz = [500, 0, 0]",
        "frame = 3",
        "load \"part\": unknown key \"frame\"; the keys here are \"name\", \"mass\", \"com\", \"inertia\" and \"grounds\" (recipe.toml:25:1)\nwaypoint 2 \"above\": there is no frame \"fixture\"; there are \"base\", \"world\" (recipe.toml:33:39)",
    ),
    (
        r#"tool = "gripper""#,
        "tool = \"gripper\"\nshown = { xyz = [1, 2, nan], frame = \"nowhere\" }",
        "waypoint 2 \"above\": shown: xyz[3] is nan; it must be a finite number (recipe.toml:38:24)\nwaypoint 2 \"above\": there is no frame \"nowhere\"; there are \"fixture\", \"base\", \"world\" (recipe.toml:38:38)",
    ),
    (
        "share = 60",
        "share = 60\nspeed = 100",
        r#"waypoint 2 "above": speed goes with a line or an arc; a joint move has a share and an accel-share (of the joints' limits, %), for its TCP follows no given path (recipe.toml:40:9)"#,
    ),
    (
        "speed = 250",
        "speed = 250\nshare = 50\naccel-share = 20",
        "waypoint 3 \"down\": share goes with a joint move; a line or an arc has a speed (mm/s) and an accel (mm/s²) of its TCP (recipe.toml:47:9)\nwaypoint 3 \"down\": accel-share goes with a joint move; a line or an arc has a speed (mm/s) and an accel (mm/s²) of its TCP (recipe.toml:48:15)",
    ),
    ("speed = 250\n", "", r#"waypoint 3 "down": a line needs a speed (mm/s), here or under [usual] (recipe.toml:42:1)"#),
    ("speed = 250", r#"speed = "250""#, r#"waypoint 3 "down": speed is text "250"; it must be a number (recipe.toml:46:9)"#),
    ("speed = 250", "sped = 250", r#"waypoint 3 "down": unknown key "sped"; did you mean "speed"? (recipe.toml:46:1)"#),
    ("accel = 1000", r#"speed = "fast""#, r#"usual: speed is text "fast"; it must be a number (recipe.toml:12:9)"#),
    (
        "via = { xyz = [170, 30, 100] }\n",
        "",
        r#"waypoint 4 "round": via is missing; an arc needs a point on its way, via = { xyz } (recipe.toml:50:1)"#,
    ),
    (
        r#"arrive = "line""#,
        "arrive = \"line\"\nvia = { xyz = [1, 2, 3] }",
        r#"waypoint 3 "down": via goes with an arc; a line or a joint move has no point on its way (recipe.toml:46:7)"#,
    ),
    (
        "via = { xyz = [170, 30, 100] }",
        "via = { xyz = [170, 30, 100], rpy = [0, 0, 0] }",
        r#"waypoint 4 "round": via: unknown key "rpy"; the keys here are "xyz" and "frame" (recipe.toml:54:31)"#,
    ),
    (
        "fly-by = 20",
        "fly-by = 20\nthen = { release = true }\ndwell = 1",
        "waypoint 2 \"above\": a fly-by point has no dwell; make it a stop point (recipe.toml:40:10)\nwaypoint 2 \"above\": a load can't be taken or released on a fly-by; make it a stop point (recipe.toml:40:10)",
    ),
    (
        r#"take = "part""#,
        r#"take = "prat""#,
        r#"waypoint 3 "down": there is no load "prat"; did you mean "part"? (recipe.toml:48:17)"#,
    ),
    (
        r#"take = "part""#,
        r#"take = "part", release = true"#,
        r#"waypoint 3 "down": then: take and release are both given; keep one (recipe.toml:48:35)"#,
    ),
    (
        r#"take = "part""#,
        "release = false",
        r#"waypoint 3 "down": then: release is false; it must be true, or not be there (recipe.toml:48:20)"#,
    ),
    (
        r#"take = "part""#,
        "",
        r#"waypoint 3 "down": then: take is missing; it must be take = "a load" or release = true (recipe.toml:48:8)"#,
    ),
    ("dwell = 0.4", "dwell = -1", r#"waypoint 3 "down": dwell is -1 s; it must be 0 or more (recipe.toml:47:9)"#),
    ("dwell = 0.4", "dwell = 2026-01-01", r#"waypoint 3 "down": dwell is a date or time; it must be a number (recipe.toml:47:9)"#),
    (
        "force = [0, 0, 40], ",
        "",
        r#"waypoint 4 "round": push: force is missing; it must be an array of 3 numbers (N) (recipe.toml:56:8)"#,
    ),
    (
        r#"frame = "tool""#,
        r#"frame = "bench""#,
        r#"waypoint 4 "round": there is no frame "bench"; there are "fixture", "base", "world" (recipe.toml:56:38)"#,
    ),
    (
        "[[waypoint]]\nname = \"above\"",
        "[[waypont]]\nname = \"above\"",
        r#"recipe: unknown key "waypont"; did you mean "waypoint"? (recipe.toml:33:3)"#,
    ),
    (
        "xyz = [100, 0, 100]",
        "xyz = [100, 0, 100], frame = 7",
        r#"waypoint 3 "down": pose: frame is the number 7; it must be text in quotes (recipe.toml:44:39)"#,
    ),
    (r#"name = "round""#, r#"name = "start""#, r#"waypoint 4: name "start" is taken already (recipe.toml:51:8)"#),
    (
        "pose = { xyz = [200, 100, 100] }",
        "pose = [200, 100, 100]",
        r#"waypoint 4 "round": pose is an array; it must be a table, { ... } (recipe.toml:52:8)"#,
    ),
    (
        "pose = { xyz = [100, 0, 100] }",
        "pose = { xyz = [100, 0, 100], rpy = [0, 0] }",
        r#"waypoint 3 "down": pose: rpy has 2 values; it must be an array of 3 numbers (recipe.toml:44:37)"#,
    ),
    (
        r#"arm = "arm.toml""#,
        "arm = \"arm.toml\"\ncarrying = \"prt\"",
        r#"recipe: there is no load "prt"; did you mean "part"? (recipe.toml:4:12)"#,
    ),
    (
        r#"name = "down""#,
        "name = \"döwn°\"\nspede = 1",
        r#"waypoint 3 "döwn°": unknown key "spede"; the keys here are "name", "joints", "pose", "near", "shown", "tool", "arrive", "share", "accel-share", "speed", "accel", "turn-speed", "turn-accel", "jerk", "turn-jerk", "via", "fly-by", "dwell", "then" and "push" (recipe.toml:44:1)"#,
    ),
];
