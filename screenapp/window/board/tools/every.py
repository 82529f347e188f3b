"""All tools in the order of the strip."""

from __future__ import annotations

from typing import TYPE_CHECKING

from screenapp.window.board.tools.arc import ArcTool
from screenapp.window.board.tools.base import Tool
from screenapp.window.board.tools.centre_arc import CentreArcTool
from screenapp.window.board.tools.chain import Draft, LinesTool
from screenapp.window.board.tools.chamfer import ChamferTool
from screenapp.window.board.tools.circle import CircleTool
from screenapp.window.board.tools.cut import CutTool
from screenapp.window.board.tools.fillet import FilletTool
from screenapp.window.board.tools.measure import MeasureTool
from screenapp.window.board.tools.mirror import MirrorTool
from screenapp.window.board.tools.offset import OffsetTool
from screenapp.window.board.tools.pattern_kinds import BoltCircleTool, GridTool, RowTool
from screenapp.window.board.tools.place import HoldTool, LoadTool
from screenapp.window.board.tools.probe import ProbeTool
from screenapp.window.board.tools.rectangle import RectangleTool
from screenapp.window.board.tools.rounded_rectangle import RoundedRectangleTool
from screenapp.window.board.tools.select import SelectTool
from screenapp.window.board.tools.slot import SlotTool
from screenapp.window.board.tools.tangent_arc import TangentArcTool
from screenapp.window.board.tools.zone import ZoneTool

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas


def every_tool(canvas: Canvas) -> tuple[Tool, ...]:
    """The tools; lines and arcs share the chain they draw."""
    draft = Draft()
    return (
        SelectTool(canvas),
        LinesTool(canvas, draft),
        ArcTool(canvas, draft),
        CentreArcTool(canvas, draft),
        TangentArcTool(canvas, draft),
        RectangleTool(canvas),
        RoundedRectangleTool(canvas),
        CircleTool(canvas),
        RowTool(canvas),
        GridTool(canvas),
        BoltCircleTool(canvas),
        SlotTool(canvas),
        ZoneTool(canvas),
        FilletTool(canvas),
        ChamferTool(canvas),
        OffsetTool(canvas),
        MirrorTool(canvas),
        HoldTool(canvas),
        LoadTool(canvas),
        ProbeTool(canvas),
        CutTool(canvas),
        MeasureTool(canvas),
    )
