import { AskTry } from './AskTry'
import { AuditEvent } from './AuditEvent'
import { AuditLink } from './AuditLink'
import { AuditSeal } from './AuditSeal'
import { BenchPlace } from './BenchPlace'
import { Casting } from './Casting'
import { Clearance } from './Clearance'
import { Cohort } from './Cohort'
import { CohortStaff } from './CohortStaff'
import { Consent, ConsentText, SafetyNote, SharingChoice } from './Consent'
import { Course } from './Course'
import { CourseModule } from './CourseModule'
import { CriterionResult } from './CriterionResult'
import { EvidenceDocument } from './EvidenceDocument'
import { FlowSheet, FlowSheetReading } from './FlowSheet'
import { IdempotencyKey } from './IdempotencyKey'
import { Instrument } from './Instrument'
import { LedgerLine } from './LedgerLine'
import { Lesson } from './Lesson'
import { LessonDraft } from './LessonDraft'
import { LessonNote } from './LessonNote'
import { LessonPassage } from './LessonPassage'
import { LessonProgress } from './LessonProgress'
import { LessonVersion } from './LessonVersion'
import { LessonWord } from './LessonWord'
import { Mail } from './Mail'
import { MediaAsset } from './MediaAsset'
import { MediaTrack } from './MediaTrack'
import { PasswordToken } from './PasswordToken'
import { Payment } from './Payment'
import { PaymentEvent } from './PaymentEvent'
import { Photo } from './Photo'
import { HeadStop, PointRelease, WitnessCall } from './PointRelease'
import { PracticeHead } from './PracticeHead'
import { Reading } from './Reading'
import { Receipt } from './Receipt'
import { Refund } from './Refund'
import { Override, PhotoPin, Review } from './Review'
import { RubricVersion } from './RubricVersion'
import { ScaleCard } from './ScaleCard'
import { SchoolSetting } from './SchoolSetting'
import { ScoreSet } from './ScoreSet'
import { Session } from './Session'
import { SignInFailure } from './SignInFailure'
import { PurchaseOrder, Sponsor } from './Sponsor'
import { Submission } from './Submission'
import { Upload } from './Upload'
import { User } from './User'
import { WatchPosition } from './WatchPosition'

/** Every entity, for the ORM's configuration. */
export const entities = [
  User, Session, SignInFailure, PasswordToken, Clearance, IdempotencyKey, SchoolSetting,
  Course, CourseModule, Cohort, BenchPlace, CohortStaff, AskTry, Sponsor, PurchaseOrder,
  Payment, PaymentEvent, LedgerLine, Refund, Receipt,
  Consent, ConsentText, SafetyNote, SharingChoice,
  Lesson, LessonVersion, LessonDraft, LessonPassage, LessonWord, LessonProgress, LessonNote, MediaAsset, MediaTrack, WatchPosition,
  Casting, RubricVersion, PracticeHead, Instrument, ScaleCard,
  Upload, Submission, Photo, Reading, FlowSheet, FlowSheetReading, EvidenceDocument,
  ScoreSet, CriterionResult, Review, Override, PhotoPin, PointRelease, WitnessCall, HeadStop,
  Mail, AuditEvent, AuditLink, AuditSeal,
]
