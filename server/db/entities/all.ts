import { AuditEvent } from './AuditEvent'
import { AuditLink } from './AuditLink'
import { AuditSeal } from './AuditSeal'
import { BenchPlace } from './BenchPlace'
import { Casting } from './Casting'
import { Clearance } from './Clearance'
import { Cohort } from './Cohort'
import { CohortStaff } from './CohortStaff'
import { CriterionResult } from './CriterionResult'
import { EvidenceDocument } from './EvidenceDocument'
import { FlowSheet, FlowSheetReading } from './FlowSheet'
import { IdempotencyKey } from './IdempotencyKey'
import { Instrument } from './Instrument'
import { Lesson } from './Lesson'
import { LessonVersion } from './LessonVersion'
import { Mail } from './Mail'
import { PasswordToken } from './PasswordToken'
import { Photo } from './Photo'
import { HeadStop, PointRelease, WitnessCall } from './PointRelease'
import { PracticeHead } from './PracticeHead'
import { Reading } from './Reading'
import { Override, PhotoPin, Review } from './Review'
import { RubricVersion } from './RubricVersion'
import { ScaleCard } from './ScaleCard'
import { SchoolSetting } from './SchoolSetting'
import { ScoreSet } from './ScoreSet'
import { Session } from './Session'
import { SignInFailure } from './SignInFailure'
import { Submission } from './Submission'
import { Upload } from './Upload'
import { User } from './User'

/** Every entity, for the ORM's configuration. */
export const entities = [
  User, Session, SignInFailure, PasswordToken, Clearance, IdempotencyKey, SchoolSetting,
  Cohort, BenchPlace, CohortStaff, Lesson, LessonVersion,
  Casting, RubricVersion, PracticeHead, Instrument, ScaleCard,
  Upload, Submission, Photo, Reading, FlowSheet, FlowSheetReading, EvidenceDocument,
  ScoreSet, CriterionResult, Review, Override, PhotoPin, PointRelease, WitnessCall, HeadStop,
  Mail, AuditEvent, AuditLink, AuditSeal,
]
