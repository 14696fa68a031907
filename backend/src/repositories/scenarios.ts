export type { CommentRow, ReviewRow, ScenarioRevisionRow, ScenarioRow } from '../models/scenarios'
